"""The spellings of our functions' names."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from thermofuncs.workbook.spelling import called_name, near_names

NAMES = st.from_regex(r"[A-Z][A-Z0-9]{2,12}", fullmatch=True)
FORMS = st.sampled_from(
    ["TF.{}", "TF_{}", "_xldudf_TF_{}", "[1]!TF_{}", "[12]!TF.{}", "'C:\\my add-ins\\tf.xlam'!TF_{}",
     "tf.xlam!TF_{}", "_xll.TF.{}"]
)


@given(NAMES, FORMS, st.data())
def test_every_spelling(name: str, form: str, data: st.DataObject) -> None:
    """Each host's spelling means the same function, in any case of letters."""
    spelled = form.format(name)
    lower = data.draw(st.lists(st.booleans(), min_size=len(spelled), max_size=len(spelled)))
    mixed = "".join(c.lower() if small else c.upper() for c, small in zip(spelled, lower, strict=True))
    assert called_name(mixed) == name


@pytest.mark.parametrize(
    "text", ["LNK", "MYTF_LNK", "TFLNK", "TF.", "XTF.LNK", "SUM", "TF.LNK.X", "[1]Sheet!TF_LNK(A1)", "TF..LNK"]
)
def test_other_names(text: str) -> None:
    """A name that only looks like one of ours is not one."""
    assert called_name(text) is None


def test_near_names() -> None:
    """A sentence about an unknown function names the nearest ones."""
    assert near_names("LNKK", ["LNK", "DRG"]) == "TF.LNK"
    assert near_names("ZZZZ", ["LNK"]) == "none"
