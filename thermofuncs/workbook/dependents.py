"""Which formulas depend on which cells."""

from __future__ import annotations

from collections import Counter, defaultdict, deque
from collections.abc import Collection, Iterable, Mapping

import numpy as np

from thermofuncs.workbook.addresses import Area, Place
from thermofuncs.workbook.prepared import Prepared


class Dependencies:
    """The references between the formulas of a workbook.

    Parameters
    ----------
    formulas : mapping of Place to Prepared.
    """

    def __init__(self, formulas: Mapping[Place, Prepared]) -> None:
        self.formulas = formulas
        self._readers: dict[Place, list[Place]] = {}
        wide: dict[str, list[tuple[Area, Place]]] = defaultdict(list)
        writers: dict[str, list[tuple[Area, Place]]] = defaultdict(list)
        arrays: dict[str, list[tuple[Area, Place]]] = defaultdict(list)
        for place, formula in formulas.items():
            for area in formula.areas:
                if area.single:
                    self._readers.setdefault(Place(area.sheet, area.top, area.left), []).append(place)
                else:
                    wide[area.sheet].append((area, place))
            writers[place.sheet].append((formula.stored.area, place))
            if not formula.stored.area.single:
                arrays[place.sheet].append((formula.stored.area, place))
        self._wide = {sheet: _Boxes(areas) for sheet, areas in wide.items()}
        self._written = {sheet: _Boxes(areas) for sheet, areas in writers.items()}
        self._array_boxes = {sheet: _Boxes(areas) for sheet, areas in arrays.items()}

    def dependents(self, seeds: Iterable[Place]) -> dict[Place, Place]:
        """Every formula that reads one of these cells, at once or not, and the cell that it leads to."""
        found: dict[Place, Place] = {}
        waiting = deque((seed, seed) for seed in seeds)
        while waiting:
            place, seed = waiting.popleft()
            for reader in self._reading(self.formulas[place].stored.area):
                if reader not in found:
                    found[reader] = seed
                    waiting.append((reader, seed))
        return found

    def _reading(self, area: Area) -> list[Place]:
        readers = self._wide[area.sheet].meeting(area) if area.sheet in self._wide else []
        if area.rows * area.columns <= len(self._readers):
            for row in range(area.top, area.bottom + 1):
                for column in range(area.left, area.right + 1):
                    readers = readers + self._readers.get(Place(area.sheet, row, column), [])
            return readers
        for place, single in self._readers.items():
            if place.sheet == area.sheet and area.covers(place.row, place.column):
                readers = readers + single
        return readers

    def precedents(self, seeds: Iterable[Place]) -> set[Place]:
        """Every formula that one of these reads, directly or through others."""
        found: set[Place] = set()
        seen: set[Area] = set()
        waiting = list(seeds)
        while waiting:
            for area in self.formulas[waiting.pop()].areas:
                if area in seen:
                    continue
                seen.add(area)
                for place in self._inside(area):
                    if place not in found:
                        found.add(place)
                        waiting.append(place)
        return found

    def circles_and_led(self, among: Collection[Place]) -> tuple[set[Place], set[Place]]:
        """Those of some formulas that stand in a circle of them, and those that read another one of them."""
        from scipy.sparse import coo_array  # noqa: PLC0415 - only a workbook with failures pays for it
        from scipy.sparse.csgraph import connected_components  # noqa: PLC0415

        places = list(among)
        number = {place: n for n, place in enumerate(places)}
        edges = [
            (number[place], number[before])
            for place in places
            for area in self.formulas[place].areas
            for before in self._inside(area)
            if before in number
        ]
        if not edges:
            return set(), set()
        readers, read = zip(*edges, strict=True)
        graph = coo_array(([1] * len(edges), (readers, read)), shape=(len(places), len(places)))
        _, labels = connected_components(graph, connection="strong")
        crowded = {label for label, size in Counter(labels.tolist()).items() if size > 1}
        circles = {place for place, label in zip(places, labels.tolist(), strict=True) if label in crowded}
        circles |= {places[one] for one, other in edges if one == other}
        return circles, {places[one] for one in readers}

    def _inside(self, area: Area) -> list[Place]:
        if not area.single:
            boxes = self._written.get(area.sheet)
            return [] if boxes is None else boxes.meeting(area)
        place = Place(area.sheet, area.top, area.left)
        if place in self.formulas:
            return [place]
        boxes = self._array_boxes.get(area.sheet)
        return [] if boxes is None else boxes.meeting(area)


class _Boxes:
    """Rectangles of one sheet, each with the formula it belongs to."""

    def __init__(self, areas: list[tuple[Area, Place]]) -> None:
        corners = np.array([area[1:] for area, _ in areas], dtype=np.int64).reshape(-1, 4)
        self.top, self.left, self.bottom, self.right = corners.T
        self.places = [place for _, place in areas]

    def meeting(self, area: Area) -> list[Place]:
        """The formulas of the rectangles that share a cell with ``area``."""
        hit = (
            (self.top <= area.bottom) & (self.bottom >= area.top)
            & (self.left <= area.right) & (self.right >= area.left)
        )
        return [self.places[number] for number in np.flatnonzero(hit)]
