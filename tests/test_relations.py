"""Relations between typed reaction properties."""

from __future__ import annotations

import csv
import math
import re
import statistics
from collections import defaultdict
from collections.abc import Callable
from pathlib import Path

import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs import relations
from thermofuncs.errors import (
    BlankInRange,
    DifferentLengths,
    GibbsEnergyOfAnotherTemperature,
    OutsideNumbers,
    TextInRange,
)
from thermofuncs.relations import (
    gibbs_energy_from_h_s,
    gibbs_energy_from_ln_k,
    ln_k_carried,
    ln_k_from_gibbs_energy,
    ln_k_from_h_s,
    reaction_sum,
)
from thermofuncs.units import R
from thermofuncs.working import Record

REFERENCE = Path(__file__).parent / "reference"
LN10 = math.log(10.0)
TEMPERATURES = st.floats(200.0, 3000.0)
ENERGIES = st.floats(-500.0, 500.0)
ENTROPIES = st.floats(-500.0, 500.0)


def trap() -> dict[str, list[dict[str, float]]]:
    """The rows of the comparison of constant properties, by reaction."""
    lines = (REFERENCE / "trap.csv").read_text(encoding="utf-8").splitlines()
    found: dict[str, list[dict[str, float]]] = defaultdict(list)
    for row in csv.DictReader(line for line in lines if not line.startswith("#")):
        found[row.pop("reaction")].append({name: float(value) for name, value in row.items()})
    return found


@pytest.mark.parametrize("reaction", trap())
def test_carried_ln_k_meets_the_table(reaction: str) -> None:
    """Ln K carried from 298.15 K with a constant ΔrH°, or ΔrCp°, meets the table in its printed digits."""
    rows = trap()[reaction]
    # the table's own ln K and ΔrH° at 298.15 K, from its longest lever
    lg_298 = statistics.fmean(row["logK_dG298_frozen"] * row["T_K"] / 298.15 for row in rows)
    last = rows[-1]
    slope = (last["logK_const_dH"] - lg_298) / (1 / 298.15 - 1 / last["T_K"])
    enthalpy = slope * LN10 * R / 1000.0
    for row in rows:
        by_enthalpy = ln_k_carried(lg_298 * LN10, 298.15, row["T_K"], enthalpy) / LN10
        by_cp = ln_k_carried(lg_298 * LN10, 298.15, row["T_K"], enthalpy, row["dCp298_J_K"]) / LN10
        # five decimals times up to five in the frozen values that ln K at 298.15 K is found from
        assert by_enthalpy == pytest.approx(row["logK_const_dH"], abs=4e-5)
        assert by_cp == pytest.approx(row["logK_const_dCp"], abs=4e-5)


@pytest.mark.parametrize("reaction", trap())
def test_frozen_gibbs_energy_is_refused(reaction: str) -> None:
    """The Gibbs energy at 298.15 K is refused at every other temperature of the table."""
    for row in trap()[reaction]:
        gibbs_energy = -row["logK_dG298_frozen"] * LN10 * R * row["T_K"] / 1000.0
        with pytest.raises(GibbsEnergyOfAnotherTemperature) as caught:
            ln_k_from_gibbs_energy(gibbs_energy, row["T_K"], 298.15)
        assert caught.value.sentence == (
            f"drg belongs to 298.15 K and t is {row['T_K']:.10g} K; ΔrG° changes with temperature, "
            "so the two may differ by 0.5 K at most. Take ln K at 298.15 K and carry it with LNKAT."
        )
        assert caught.value.worksheet_value == "#NUM!"
        frozen = ln_k_from_gibbs_energy(gibbs_energy, row["T_K"], row["T_K"]) / LN10
        assert frozen == pytest.approx(row["logK_dG298_frozen"], abs=1e-12)


def test_sizes_in_the_cautions_are_the_table_s() -> None:
    """The error sizes that the cautions quote are the largest and the median of the table."""
    for text, column in (
        (relations.CONSTANT_ENTHALPY_ERROR, "err_const_dH"),
        (relations.CONSTANT_CP_ERROR, "err_const_dCp"),
    ):
        for temperature, largest, median in _quoted(text):
            errors = [abs(row[column]) for rows in trap().values() for row in rows if row["T_K"] == temperature]
            assert len(errors) == 11
            assert f"{max(errors):.2f}" == largest
            if median:
                assert f"{statistics.median(errors):.2f}" == median


def _quoted(text: str) -> list[tuple[float, str, str]]:
    """Temperature, largest and median error as a caution prints them."""
    found = re.findall(r"up to ([0-9.]+)(?: \(median ([0-9.]+)\))? at ([0-9]+) K", text)
    assert len(found) == 2
    return [(float(temperature), largest, median) for largest, median, temperature in found]


def test_gibbs_energy_half_a_kelvin_away_is_used_with_a_caution() -> None:
    """A Gibbs energy that belongs to a temperature within 0.5 K is used, and said to be."""
    record = Record()
    assert ln_k_from_gibbs_energy(-10.0, 298.0, 298.15, record) == pytest.approx(10000 / (R * 298.0))
    assert record.cautions == ["ΔrG° belongs to 298.15 K and is used at 298 K."]
    with pytest.raises(GibbsEnergyOfAnotherTemperature):
        ln_k_from_gibbs_energy(-10.0, 298.15, 298.66)


def test_water_formation_from_codata_key_values() -> None:
    """ΔfG° of H2O(l) from the CODATA key values of ΔfH° and S° is -237.14 kJ/mol."""
    # CODATA Key Values for Thermodynamics (Cox, Wagman & Medvedev, 1989): ΔfH°(H2O, l) = -285.830 kJ/mol,
    # S°/(J/(mol K)): H2O(l) 69.95, H2(g) 130.680, O2(g) 205.152; ΔfG° = -237.140 kJ/mol and ln K =
    # 95.6613 follow by hand
    entropy = reaction_sum([1, -1, -0.5], [69.95, 130.680, 205.152])
    assert entropy == pytest.approx(-163.306, abs=1e-9)
    gibbs_energy = gibbs_energy_from_h_s(-285.830, entropy, 298.15)
    assert gibbs_energy == pytest.approx(-237.140, abs=0.0005)
    assert ln_k_from_h_s(-285.830, entropy, 298.15) == pytest.approx(95.6613, abs=1e-4)


@given(ENERGIES, TEMPERATURES)
def test_ln_k_and_gibbs_energy_are_inverse(gibbs_energy: float, temperature: float) -> None:
    """ΔrG° from ln K from ΔrG° is ΔrG°."""
    ln_k = ln_k_from_gibbs_energy(gibbs_energy, temperature, temperature)
    assert gibbs_energy_from_ln_k(ln_k, temperature) == pytest.approx(gibbs_energy, rel=1e-14)


@given(ENERGIES, ENTROPIES, st.floats(-100.0, 100.0), TEMPERATURES, TEMPERATURES)
def test_carried_ln_k_is_that_of_h_and_s(h: float, s: float, cp: float, t1: float, t2: float) -> None:
    """Ln K at t1 carried to t2 is ln K from the same ΔrH°, ΔrS° and ΔrCp° at t2."""
    direct = ln_k_from_h_s(h, s, t2, cp, reference=t1)
    carried = ln_k_carried(ln_k_from_h_s(h, s, t1), t1, t2, h, cp)
    assert carried == pytest.approx(direct, abs=1e-11)


@given(st.floats(-50, 50), TEMPERATURES, TEMPERATURES, ENERGIES)
def test_carrying_there_and_back_is_the_identity(ln_k: float, t1: float, t2: float, h: float) -> None:
    """Ln K carried to another temperature and back is ln K, and the reverse reaction has its negative."""
    there = ln_k_carried(ln_k, t1, t2, h)
    assert ln_k_carried(there, t2, t1, h) == pytest.approx(ln_k, abs=1e-11)
    assert ln_k_carried(-ln_k, t1, t2, -h) == -there


def test_last_step_is_the_result_bit_for_bit() -> None:
    """The value of the last step that is recorded is the result."""
    cases: list[Callable[[Record | None], float]] = [
        lambda record: ln_k_from_gibbs_energy(-33.3, 700.0, 700.0, record),
        lambda record: gibbs_energy_from_ln_k(3.3, 700.0, record),
        lambda record: gibbs_energy_from_h_s(-92.2, -198.7, 700.0, -45.0, record=record),
        lambda record: ln_k_from_h_s(-92.2, -198.7, 700.0, -45.0, record=record),
        lambda record: ln_k_carried(13.3, 298.15, 700.0, -92.2, -45.0, record=record),
        lambda record: reaction_sum([-1, -3, 2], [191.6, 130.7, 192.8], record),
    ]
    for case in cases:
        record = Record()
        result = case(record)
        assert record.steps[-1].value == result == case(None)


@pytest.mark.parametrize(
    ("t2", "cp", "caution"),
    [
        (348.0, None, ""),
        (348.3, None, "ΔrH° is held constant over 50.15 K. In eleven common reactions"),
        (598.0, 10.0, ""),
        (1000.0, 10.0, "ΔrCp° is held constant over 701.85 K. In eleven common reactions"),
    ],
)
def test_distance_is_a_caution(t2: float, cp: float | None, caution: str) -> None:
    """Ln K carried over 50 K without ΔrCp°, or over 300 K with it, has a caution with the typical error."""
    record = Record()
    ln_k_carried(1.0, 298.15, t2, 40.0, cp, record=record)
    assert [text[: len(caution)] for text in record.cautions] == ([caution] if caution else [])
    assert all(len(text) < 255 for text in record.cautions)


def test_joules_are_suspected() -> None:
    """A molar energy of more than 20000 kJ/mol is said to look like joules."""
    record = Record()
    ln_k_from_gibbs_energy(-50000.0, 298.15, 298.15, record)
    assert record.cautions == ["drg is -50000 kJ/mol, which is unusually large: is the number in J/mol?"]


def test_reaction_sum_refuses_blanks_texts_and_lengths() -> None:
    """A blank, a text or a logical value in a reaction sum is refused with its place, never taken for 0."""
    with pytest.raises(BlankInRange) as blank:
        reaction_sum([1, None], [1.0, 2.0])
    assert blank.value.sentence == (
        "coefficients has a blank cell, number 2 in row order: fill it, or write 0 if 0 is meant."
    )
    for cell in ("-110,5", True):
        with pytest.raises(TextInRange) as text:
            reaction_sum([1, -1], [1.0, cell])
        assert text.value.sentence == (f"values has {cell!r} as cell number 2 in row order: a number is needed.")
    with pytest.raises(DifferentLengths) as lengths:
        reaction_sum([1, -1, 2], [1.0, 2.0])
    assert lengths.value.sentence == (
        "coefficients has 3 cells and values has 2: ranges of equal length are needed, one value for each."
    )


def test_reaction_sum_cautions() -> None:
    """A sum without reactants, and a small difference of large terms, each have a caution."""
    record = Record()
    reaction_sum([1, 1], [1.0, 2.0], record)
    assert record.cautions == ["All coefficients have one sign: reactants count negative, products positive."]
    record = Record()
    reaction_sum([1, -1], [100000.5, 100000.0], record)
    assert record.cautions == [
        (
            "The sum is a small difference of large terms (2e+05 in all): "
            "an error in one of them weighs 4e+05 times as much in the result."
        )
    ]


def test_results_outside_the_numbers_are_refused() -> None:
    """A result beyond the double range is an error with its sentence, never infinite."""
    with pytest.raises(OutsideNumbers) as caught:
        ln_k_from_gibbs_energy(1e307, 1e-5, 1e-5)
    assert caught.value.sentence == (
        "ln K is outside the range of numbers. Check the units and the sizes of the arguments."
    )
    with pytest.raises(OutsideNumbers):
        reaction_sum([1e200, 1], [1e200, 1])
    with pytest.raises(OutsideNumbers):
        reaction_sum([1, 1], [1.7e308, 1.7e308])
