"""A user's own data: substances and whole reactions from a worksheet table, frozen."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

from thermofuncs.substances.printed import composition_key
from thermofuncs.substances.records import Source, Substance, SubstanceRow


@dataclass(frozen=True, slots=True)
class UserReaction:
    """A whole reaction of a user's table.

    Parameters
    ----------
    equation : str. As written.
    key : str. The equation with single spaces and one sign between its sides.
    drh : float. ΔrH° at ``t_ref``. [J/mol]
    drs : float. ΔrS° at ``t_ref``. [J/(mol K)]
    drcp : float or None. ΔrCp°, constant; None where the table gives none. [J/(mol K)]
    t_ref : float. The temperature that the values belong to. [K]
    t_low, t_high : float. Range. [K]
    source : Source.
    """

    equation: str
    key: str
    drh: float
    drs: float
    drcp: float | None
    t_ref: float
    t_low: float
    t_high: float
    source: Source


@dataclass(frozen=True, slots=True, eq=False)
class UserData:
    """The substances and reactions of one table; equal where the cells are equal.

    Parameters
    ----------
    substances : tuple of Substance.
    reactions : tuple of UserReaction.
    digest : str. Hash of the cells.
    """

    substances: tuple[Substance, ...]
    reactions: tuple[UserReaction, ...]
    digest: str

    def __eq__(self, other: object) -> bool:
        """Whether the cells are equal."""
        return isinstance(other, UserData) and other.digest == self.digest

    def __hash__(self) -> int:
        """Of the cells."""
        return hash(self.digest)

    def substance(self, text: str) -> Substance | None:
        """The substance with this label or name, if there is one."""
        for x in self.substances:
            if text in (x.label, x.segments[0].row.name):
                return x
        folded = [x for x in self.substances if x.segments[0].row.name.casefold() == text.casefold()]
        return folded[0] if len(folded) == 1 and not text[:1].isupper() else None

    def by_formula(self, key: str) -> dict[str, Substance]:
        """The substances of a composition and charge, by label."""
        found = {}
        for x in self.substances:
            if f"{composition_key(tuple(x.composition.items()))}|{x.charge}" == key:
                found[x.label] = x
        return found

    def labels(self) -> Iterable[str]:
        """Labels and names."""
        return {text for x in self.substances for text in (x.label, x.segments[0].row.name)}

    def rows(self) -> list[SubstanceRow]:
        """Every row."""
        return [segment.row for x in self.substances for segment in x.segments]
