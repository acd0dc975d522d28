"""Everyday names."""

from __future__ import annotations

import pytest

from thermofuncs.errors import AmbiguousSubstance
from thermofuncs.substances import find_substance
from thermofuncs.substances.common_names import common_names, normal_text, normalised, tied_to


def test_there_are_enough() -> None:
    """There are at least 230 everyday names."""
    assert len(common_names()) >= 230


@pytest.mark.parametrize("name", sorted(common_names()))
def test_every_name_resolves(name: str) -> None:
    """Each name finds its first label, or asks for the phase where it has several and implies none."""
    labels = common_names()[name]
    if len(labels) == 1 or tied_to(name):
        found = find_substance(name)
        first = find_substance(labels[0].split(">")[0])
        assert found.composition == first.composition
        assert found.t_low == first.t_low
    else:
        with pytest.raises(AmbiguousSubstance) as raised:
            find_substance(name)
        assert all(label in raised.value.sentence for label in labels)
        for label in labels:
            phase = label[label.rfind("(") :]
            assert find_substance(name + phase).label == find_substance(label).label


@pytest.mark.parametrize(
    ("text", "normal"),
    [
        ("H2O( cr)", "H2O(s)"), ("1‑butene\u200b ( g )", "1-butene(g)"), ("Fe (cr)", "Fe(s)"), (" Fe(L) ", "Fe(l)"),
        ("Cl−(aq)", "Cl-(aq)"),
    ],
)
def test_normal_text(text: str, normal: str) -> None:
    """A text is written with the house's phases, single spaces and plain minus signs."""
    assert normal_text(text) == normal


def test_case_and_hyphens_do_not_matter() -> None:
    """A name is the same in any case, with hyphens or spaces."""
    assert normalised("N-Butane") == normalised("n butane")
    assert find_substance("Soda-Ash").label == "Na2CO3(s)"
