"""How a fit is to be made: the options of a call, as the engine takes them."""

from __future__ import annotations

from dataclasses import dataclass

from thermofuncs.errors import OptionsClash, RequiredHere


@dataclass(frozen=True, slots=True, eq=False)
class Settings:
    """How a fit is to be made; each reading of one text of options is one object, so that fits are found by it.

    Parameters
    ----------
    level : float. Level of confidence of the limits.
    reference : float or None. Temperature at which parameters are reported; None for the fit's own. [K]
    known : bool. The stated uncertainties are known: limits normal, chi-square tested. Otherwise they are
        weights, scaled by the residuals, with limits by Student's t.
    constant_in_value : bool. The error is one of the quantity itself, not of its logarithm.
    u_temperature : float. Standard uncertainty of every temperature, 0 for none. [K]
    orthogonal : bool. Errors in T by orthogonal regression; otherwise by effective variance.
    robust : bool. Huber's M-estimator.
    slope : bool. Clarke-Glew with the temperature derivative of ΔrCp°.
    apparent : str. The condition that apparent constants hold at, such as ``pH 7.5``.
    scale : str. The scale of bare temperatures, in which Antoine's C is reported too.
    """

    level: float = 0.95
    reference: float | None = None
    known: bool = False
    constant_in_value: bool = False
    u_temperature: float = 0.0
    orthogonal: bool = False
    robust: bool = False
    slope: bool = False
    apparent: str = ""
    scale: str = "K"

    def check(self, *, nonlinear: bool, with_u: bool) -> None:
        """Refuse settings that exclude each other or need what is not given."""
        if self is PLAIN:
            return
        if self.orthogonal and not self.u_temperature:
            raise RequiredHere(
                argument="u_T", needed_by="the option orthogonal", meaning="the uncertainty of T, such as u_T=0.1"
            )
        for wanted, name in ((self.known, "u_known"), (self.u_temperature > 0.0, "u_T")):
            if wanted and not with_u:
                raise RequiredHere(
                    argument="u", needed_by=f"the option {name}", meaning="the standard uncertainties of y"
                )
        if self.robust and self.known:
            raise OptionsClash(
                first="robust", second="u_known", why="the robust scale comes from the residuals; choose one of them"
            )
        special = [
            name
            for wanted, name in (
                (self.robust, "robust"), (self.constant_in_value, "constant_in=K"), (self.u_temperature > 0.0, "u_T"),
            )
            if wanted
        ]  # fmt: skip
        if len(special) > 1:
            raise OptionsClash(first=special[0], second=special[1], why="each is an estimator; choose one of them")
        for wanted, name in ((self.robust, "robust"), (self.orthogonal, "orthogonal")):
            if wanted and nonlinear:
                raise OptionsClash(first=name, second="the law Antoine", why="it is for laws with linear parameters")


PLAIN = Settings()
