"""The bundled uncertainties belong to records that agree with the key values."""

from __future__ import annotations

import pytest

from thermofuncs.substances import codata, find_substance, forms
from thermofuncs.units import R


@pytest.mark.parametrize("label", sorted(codata.values()))
def test_an_uncertainty_is_given_where_the_data_agrees(label: str) -> None:
    """Each substance with a bundled uncertainty meets the key value that it belongs to."""
    printed = codata.values()[label]
    row = next(s.row for s in find_substance(label).segments if s.t_low <= 298.15 <= s.t_high)
    interval = next(i for i in row.intervals if i.t_high >= 298.15)
    if printed["dfH298_kJ_mol"]:
        bound = max(0.05, float(printed["u_dfH_kJ_mol"] or 0.0))
        assert row.formation_enthalpy / 1000.0 == pytest.approx(float(printed["dfH298_kJ_mol"]), abs=bound)
    if printed["S298_J_mol_K"]:
        bound = float(printed["u_S_J_mol_K"])
        assert forms.entropy(interval, 298.15) * R == pytest.approx(float(printed["S298_J_mol_K"]), abs=bound)


def test_what_has_no_key_value_is_unknown() -> None:
    """A label without a key value has unknown uncertainties."""
    assert {u.kind for u in codata.uncertainties("CaCO3(s)")} == {"unknown"}
