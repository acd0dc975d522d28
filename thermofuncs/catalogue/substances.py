"""Worksheet functions of substances."""

from __future__ import annotations

from collections.abc import Callable
from typing import Any

from thermofuncs import compiled, standard
from thermofuncs.catalogue.common import DATA, OPTION_WORDS, OPTIONS, SUBSTANCE, TEMPERATURE, UNIT
from thermofuncs.catalogue.declaration import Argument, Function
from thermofuncs.catalogue.reading import Options
from thermofuncs.combination import Combination
from thermofuncs.errors import NothingFound
from thermofuncs.substances import forms
from thermofuncs.substances.elements import molar_mass
from thermofuncs.substances.forms import REFERENCE_TEMPERATURE
from thermofuncs.substances.formulas import parse_formula
from thermofuncs.substances.lookup import find_substance, search
from thermofuncs.substances.records import Substance, SubstanceRow
from thermofuncs.substances.user_table import UserData
from thermofuncs.units import R
from thermofuncs.working import Record

GROUP = "Substances"
FOUND_ROWS = 200
LN10 = standard.LN10
Build = Callable[[str, UserData | None, bool, bool], Combination]
Scalar = Callable[[Combination, float, Record | None], float]


def _over_temperature(
    name: str, summary: str, unit: str, example: str, build: Build, scalar: Scalar,
    vector: Callable[[Combination, Any], Any], *, with_unit: bool = True,
) -> Function:
    def compute(
        substance: str, temperature: float, data: UserData | None, options: Options,
        record: Record | None = None,
    ) -> float:
        return scalar(build(substance, data, options.atm, options.extrapolate), temperature, record)

    def over_array(substance: str, temperatures: Any, data: UserData | None, options: Options) -> Any:  # noqa: ANN401  numpy arrays
        return vector(build(substance, data, options.atm, options.extrapolate), temperatures)

    arguments = (SUBSTANCE, TEMPERATURE, *((UNIT,) if with_unit else ()), DATA, OPTIONS)
    return Function(
        name, GROUP, summary, arguments, unit, (example, 900.0), compute, over_array, options=OPTION_WORDS
    )


def _increment_array(table: Combination, t: Any) -> Any:  # noqa: ANN401  numpy arrays
    reference = table.h_and_s(REFERENCE_TEMPERATURE)[0] * REFERENCE_TEMPERATURE
    return (table.h_array(t) * t - reference) * R / 1000


def molar_mass_of(formula: str, record: Record | None = None) -> float:
    """The molar mass of a formula. [g/mol]"""
    parsed = parse_formula(formula, "formula")
    value = molar_mass(parsed.composition, parsed.charge)
    if record is not None:
        parts = " + ".join(f"{n:g} {element}" for element, n in parsed.composition.items())
        record.step(
            f"M({formula})", "Σ n A", parts, value, "g/mol",
            "IUPAC standard atomic weights 2021 (Prohaska et al., Pure Appl. Chem. 94 (2022) 573)",
        )
    return value


def _formula_text(row: SubstanceRow) -> str:
    """Atoms in the order of Hill: carbon and hydrogen first, then by the alphabet."""
    first = ("C", "H") if "C" in row.composition else ()
    order = sorted(row.composition, key=lambda e: (e not in first, e))
    atoms = " ".join(e if row.composition[e] == 1 else f"{e}{row.composition[e]:g}" for e in order)
    return f"{atoms} charge {row.charge:+d}" if row.charge else atoms


def _at_reference(row: SubstanceRow) -> list[list[object]]:
    """Formation enthalpy and entropy at 298.15 K, where the row has them."""
    if row.gibbs_only:
        return [["formation enthalpy and entropy", "not in the data: a Gibbs energy at 298.15 K alone", ""]]
    for interval in row.intervals:
        if interval.t_low <= REFERENCE_TEMPERATURE <= interval.t_high:
            return [
                ["formation enthalpy at 298.15 K", row.formation_enthalpy / 1000, "kJ/mol"],
                ["entropy at 298.15 K", forms.entropy(interval, REFERENCE_TEMPERATURE) * R, "J/(mol K)"],
            ]
    return []


def _table_of(substance: Substance) -> list[list[object]]:
    rows: list[list[object]] = [["item", "value", "unit"], ["substance", substance.label, ""]]
    first = substance.segments[0].row
    rows += [
        ["formula", _formula_text(first), ""],
        ["phase", substance.phase, ""],
        ["molar mass of the data", first.molar_mass, "g/mol"],
    ]
    for i, segment in enumerate(substance.segments, 1):
        row = segment.row
        if len(substance.segments) > 1:
            rows.append([f"record {i}", row.label, ""])
        rows += [
            *_at_reference(row),
            ["from", segment.t_low, "K"],
            ["to", segment.t_high, "K"],
            ["source", str(row.source), ""],
        ]
        rows += [["note", sentence, ""] for sentence in dict.fromkeys(note.sentence for note in row.notes)]
    if substance.remark:
        rows.append(["remark", substance.remark, ""])
    if substance.stops:
        rows.append(["above", substance.stops, ""])
    return rows


def substance_table(substance: str, data: UserData | None, record: Record | None = None) -> list[list[object]]:
    """The data of a substance as a table."""
    del record
    return _table_of(find_substance(substance, data, "substance"))


def found_table(text: str, data: UserData | None, record: Record | None = None) -> list[list[object]]:
    """What matches a name, a formula or a list of elements."""
    rows = search(text, data)
    if not rows:
        raise NothingFound(text=text)
    if record is not None and len(rows) > FOUND_ROWS:
        record.caution(f"{len(rows)} records match; the first {FOUND_ROWS} are shown.")
    head: list[list[object]] = [["substance", "formula", "phase", "from K", "to K", "source"]]
    return head + [
        [row.label, _formula_text(row), row.phase, row.t_low, row.t_high, str(row.source)]
        for row in rows[:FOUND_ROWS]
    ]


FUNCTIONS: tuple[Function, ...] = (
    _over_temperature(
        "MOLCP", "Molar heat capacity at T, in J/(mol K).", "J/(mol K)", "CO2(g)",
        compiled.substance, standard.heat_capacity, lambda c, t: c.cp_array(t) * R,
    ),
    _over_temperature(
        "MOLS", "Standard molar entropy at T, in J/(mol K).", "J/(mol K)", "CO2(g)",
        compiled.substance, standard.entropy, lambda c, t: c.s_array(t) * R,
    ),
    _over_temperature(
        "MOLDH", "Enthalpy increment H°(T) − H°(298.15 K), in kJ/mol.", "kJ/mol", "CO2(g)",
        compiled.substance, standard.enthalpy_increment, _increment_array,
    ),
    _over_temperature(
        "DFH", "Formation enthalpy from the elements in their reference phases at T, in kJ/mol.", "kJ/mol",
        "CO2(g)", compiled.formation, standard.enthalpy, lambda c, t: c.h_array(t) * R * t / 1000,
    ),
    _over_temperature(
        "DFG", "Formation Gibbs energy from the elements in their reference phases at T, in kJ/mol.",
        "kJ/mol", "CO2(g)", compiled.formation, standard.gibbs_energy,
        lambda c, t: c.minus_g_array(t) * -R * t / 1000,
    ),
    _over_temperature(
        "LGKF", "Decadic logarithm of the formation constant at T.", "1", "CO2(g)",
        compiled.formation, standard.lg_k, lambda c, t: c.minus_g_array(t) / LN10, with_unit=False,
    ),
    Function(
        "MOLM", GROUP, "Molar mass of a formula, in g/mol.",
        (Argument("formula", "a chemical formula", "text"), UNIT), "g/mol", ("CaSO4*2H2O",), molar_mass_of,
    ),
    Function(
        "SUBSTANCE", GROUP, "Table of a substance's data: formula, phase, ranges, transitions, sources.",
        (SUBSTANCE, DATA), "table", ("Fe(s)",), substance_table, result_shape="table",
    ),
    Function(
        "FINDSUBSTANCE", GROUP, "Table of the substances that match a name, a formula or elements.",
        (Argument("text", "a name, a formula, or elements separated by spaces", "text"), DATA), "table",
        ("limestone",), found_table, result_shape="table",
    ),
)
