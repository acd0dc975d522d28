"""The spellings under which a worksheet function of ours stands in formulas."""

from __future__ import annotations

import re
from collections.abc import Collection
from difflib import get_close_matches
from functools import lru_cache

_OURS = re.compile(
    r"(?:(?:'(?:[^']|'')*'|\[[0-9]+\]|[^'!\[\]()]+)!)?"
    r"(?:_xll\.|_xludf\.|_xlfn\.)?(?:_xldudf_TF_|TF\.|TF_)(?P<name>[A-Z][A-Z0-9]*)",
    re.IGNORECASE,
)
_SEEMS = re.compile(r"(?<![\w.])(?:_xldudf_TF_|TF\.|TF_)[A-Z][A-Z0-9]*\s*\(", re.IGNORECASE)


def seems_ours(formula: str) -> bool:
    """Whether the text of a formula that cannot be read seems to call one of ours."""
    return _SEEMS.search(formula) is not None


@lru_cache(maxsize=4096)
def called_name(spelled: str) -> str | None:
    r"""The name in capitals that a call means, if it is spelled as one of ours.

    Parameters
    ----------
    spelled : str. What stands before the bracket: ``TF.LNK``, ``TF_LNK``, ``_xldudf_TF_LNK``,
        ``[1]!TF_LNK``, ``'C:\add-ins\\tf.xlam'!TF_LNK``, in any case.

    Returns
    -------
    str or None. ``LNK``; it may be a name that no function has.
    """
    match = _OURS.fullmatch(spelled.strip())
    return None if match is None else match["name"].upper()


def near_names(name: str, names: Collection[str]) -> str:
    """The nearest function names, for a sentence."""
    near = get_close_matches(name, sorted(names), 3, 0.5)
    return ", ".join(f"TF.{one}" for one in near) or "none"
