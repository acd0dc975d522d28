"""The record of a calculation: its steps, and the cautions that go with its result."""

from __future__ import annotations

from dataclasses import dataclass, field

Value = float | str


@dataclass(frozen=True, slots=True)
class Step:
    """One step of a calculation.

    Parameters
    ----------
    symbol : str. What is computed, such as ``ΔrH°``.
    relation : str. The relation in symbols, such as ``ΔrH° = Σ ν H°``.
    substituted : str. The relation with its numbers.
    value : float or str. The value itself, unrounded.
    unit : str. The unit of ``value``; ``1`` where it has none.
    source : str. Where the relation or the data comes from.
    """

    symbol: str
    relation: str
    substituted: str
    value: Value
    unit: str
    source: str = ""


@dataclass(slots=True)
class Record:
    """Collects the steps and cautions of one scalar calculation, in order."""

    steps: list[Step] = field(default_factory=list)
    cautions: list[str] = field(default_factory=list)

    def step(
        self, symbol: str, relation: str, substituted: str, value: Value, unit: str, source: str = ""
    ) -> None:
        """Add a step."""
        self.steps.append(Step(symbol, relation, substituted, value, unit, source))

    def caution(self, sentence: str) -> None:
        """Add a caution, once."""
        if sentence not in self.cautions:
            self.cautions.append(sentence)


def shown(value: float, digits: int = 7) -> str:
    """A number as it stands inside a substituted relation, with a minus in brackets."""
    text = f"{value:.{digits}g}"
    return f"({text})" if text.startswith("-") else text
