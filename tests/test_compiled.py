"""Formation from the elements against the NIST-JANAF tables, which the library janaf ships (a test dependency)."""

from __future__ import annotations

import csv
from functools import lru_cache
from pathlib import Path

import janaf
import pytest

import thermofuncs
from thermofuncs.errors import OutsideRange

REFERENCE = Path(__file__).parent / "reference" / "janaf_tables.csv"
TEMPERATURES = (298.15, 500.0, 1000.0, 1500.0)
CLOSE_LOG, CLOSE_ENERGY = 0.03, 0.5  # [1], [kJ/mol]
WIDE_LOG, WIDE_ENERGY = 0.25, 5.0
# log Kf further away than the wide bound, all at 298.15 K or 500 K; the reasons stand in the reference file
FURTHER = {
    ("N2O4(g)", 298.15): -0.352,
    ("COS(g)", 298.15): 0.579,
    ("COS(g)", 500.0): 0.346,
    ("HCN(g)", 298.15): 0.361,
    ("OH(g)", 298.15): 0.301,
}


def rows() -> list[dict[str, str]]:
    """The rows of the reference file."""
    lines = REFERENCE.read_text(encoding="utf-8").splitlines()
    return list(csv.DictReader(line for line in lines if not line.startswith("#")))


@lru_cache(maxsize=1)
def distances() -> dict[tuple[str, float], tuple[float, float, float]]:
    """Ours minus the table's ΔfH°, ΔfG° [kJ/mol] and log Kf, by substance and temperature [K]."""
    found: dict[tuple[str, float], tuple[float, float, float]] = {}
    for row in rows():
        substance = row["substance"]
        for line in janaf.Table(row["table"]).df.iter_rows(named=True):
            t = line["T(K)"]
            printed = (line["delta-f H"], line["delta-f G"], line["log Kf"])
            if t not in TEMPERATURES or None in printed:
                continue
            try:
                ours = [thermofuncs.call(name, substance, t) for name in ("DFH", "DFG", "LGKF")]
            except OutsideRange:
                continue  # the table goes on above melting
            found[substance, t] = (ours[0] - printed[0], ours[1] - printed[1], ours[2] - printed[2])
    return found


def is_close(distance: tuple[float, float, float]) -> bool:
    """Whether all three lie within the close bounds."""
    h, g, log = map(abs, distance)
    return log <= CLOSE_LOG and max(h, g) <= CLOSE_ENERGY


def test_the_tables_are_named_and_many() -> None:
    """The tables are of the substances named, 49 of them, nearly all at four temperatures."""
    assert len(rows()) == len({row["table"] for row in rows()}) == 49
    for row in rows():
        phase = janaf.Table(row["table"]).formula.rsplit("(", 1)[1].rstrip(")")
        ours = row["substance"].rsplit("(", 1)[1].rstrip(")")
        assert {"cr": "s"}.get(phase, phase) in (ours, "ref"), row
    assert len(distances()) >= 185


def test_formation_properties_agree_with_the_tables() -> None:
    """ΔfH° and ΔfG° lie within 5 kJ/mol and log Kf within 0.25 of the table, but for five that are listed."""
    beyond = {
        case: round(distance[2], 3) for case, distance in distances().items() if abs(distance[2]) > WIDE_LOG
    }
    assert beyond == FURTHER
    assert all(max(abs(h), abs(g)) <= WIDE_ENERGY for h, g, _ in distances().values())


def test_three_quarters_are_close() -> None:
    """Three quarters of the values lie within 0.03 in log Kf and 0.5 kJ/mol."""
    close = [case for case, distance in distances().items() if is_close(distance)]
    assert len(close) >= 60
    values = [
        bound
        for h, g, log in distances().values()
        for bound in (abs(h) <= CLOSE_ENERGY, abs(g) <= CLOSE_ENERGY, abs(log) <= CLOSE_LOG)
    ]
    assert sum(values) >= 0.75 * len(values)


@pytest.mark.parametrize("row", rows(), ids=lambda row: row["substance"])
def test_each_larger_distance_has_its_reason(row: dict[str, str]) -> None:
    """A substance has a reason in the reference file if and only if one of its values lies further away."""
    own = [distance for (substance, _), distance in distances().items() if substance == row["substance"]]
    assert own
    assert bool(row["reason"]) == (not all(map(is_close, own))), own
