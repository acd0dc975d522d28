"""A fit as a reaction row of a user's data table: what was measured goes on into every reaction function."""

from __future__ import annotations

from thermofuncs.errors import NoReactionRow
from thermofuncs.fits.fitting import Fit

COLUMNS = ("reaction", "drH", "drS", "drCp", "T_ref", "T_low", "T_high", "source")


def reaction_row(fit: Fit, reaction: str) -> list[list[object]]:
    """The header and the row of a data table.

    Parameters
    ----------
    fit : Fit. Of K by van 't Hoff or Clarke-Glew, or of a vapour pressure by Clausius-Clapeyron.
    reaction : str. The equation that K belongs to.

    Returns
    -------
    list of two rows. ΔrH° [kJ/mol], ΔrS° and ΔrCp° [J/(mol K)] at the fit's reference temperature, the range of
    the points, and ``fit of <range>, n points`` as source, with the condition of apparent constants first.

    Raises
    ------
    NoReactionRow
        The law has no ΔrH° and ΔrS°, or a ΔrCp° that changes with temperature.
    """
    law = fit.law
    remedy = "fit K with van't Hoff or Clarke-Glew, or pressures with Clausius-Clapeyron"
    if law.family not in {"reaction", "vapour"} or law.nonlinear:
        raise NoReactionRow(law=law.name, remedy=remedy)
    if law.count > 3:
        raise NoReactionRow(law=f"{law.name} with cp_slope", remedy="leave cp_slope out, as a row has a constant ΔrCp°")
    prefix = "dr" if law.family == "reaction" else "dvap"
    apparent = f"apparent at {fit.settings.apparent}, " if fit.settings.apparent else ""
    points = fit.points
    source = f"{apparent}fit of {points.low:.6g} to {points.high:.6g} K, {points.size} points"
    heat_capacity: object = fit.value("drCp") if law.count > 2 else ""
    return [
        list(COLUMNS),
        [
            reaction, fit.value(f"{prefix}H"), fit.value(f"{prefix}S"), heat_capacity, fit.reference, points.low,
            points.high, source,
        ],
    ]  # fmt: skip
