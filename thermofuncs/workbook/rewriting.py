"""What a stored formula becomes for the evaluator, and what it depends on.

The evaluator gets text in which every name, table and sheet is resolved, calls of our functions carry the
number of their place, and everything that it would take differently from a spreadsheet is spelled out.
"""

from __future__ import annotations

import re
from collections.abc import Collection, Sequence
from dataclasses import dataclass

import formualizer

from thermofuncs.workbook import natives
from thermofuncs.workbook.addresses import Area, Place, Reference, parse_reference, split_sheet
from thermofuncs.workbook.book import Book, StoredFormula
from thermofuncs.workbook.formula_tree import (
    LONGEST,
    Call,
    Group,
    Node,
    Operand,
    Text,
    UnreadableFormula,
    formula_tree,
    significant,
)
from thermofuncs.workbook.prepared import Prepared, Site, as_written
from thermofuncs.workbook.spelling import called_name, near_names
from thermofuncs.workbook.tables import structured_area

SITE, FIT, MAP = "TFSITE", "TFFIT", "TFMAP"
_LIBRARY_PREFIX = re.compile(r"^(?:_xlfn\.|_xlws\.|_xludf\.)+", re.IGNORECASE)
_EXTERNAL = re.compile(r"^'?[^'!]*\[[^\]]*\][^'!]*'?!|^\[[0-9]+\]")
_LARGEST_FILL = 2_000_000
_DEEPEST_NAME = 16


@dataclass(frozen=True, slots=True)
class _Context:
    """How an expression is taken: entered as an array, and whether a bare range stays one."""

    array: bool
    keep: bool
    sheet: str
    rows: int
    columns: int
    depth: int = 0

    def inside(self, *, array: bool | None = None, keep: bool) -> _Context:
        return _Context(
            self.array if array is None else array, keep, self.sheet, self.rows, self.columns, self.depth
        )


class Rewriter:
    """Rewrites the formulas of one workbook.

    Parameters
    ----------
    book : Book. The workbook.
    names : collection of str. The names of our functions.
    tables : collection of str. Those of them that give a table.
    """

    def __init__(self, book: Book, names: Collection[str], tables: Collection[str]) -> None:
        self.book, self.names, self.tables = book, names, tables
        self.sites: list[Site] = []
        nowhere = Place("", 1, 1)
        nothing = StoredFormula("", nowhere, "normal", Area("", 1, 1, 1, 1), dynamic=False, value=None)
        self._prepared = Prepared(nowhere, nothing)

    def prepare(self, place: Place, stored: StoredFormula) -> Prepared:
        """The formula of a cell, ready for the evaluator."""
        self._prepared = prepared = Prepared(place, stored)
        if stored.kind == "dataTable":
            prepared.reasons.append("it belongs to a what-if table")
            return prepared
        if stored.area.rows * stored.area.columns > _LARGEST_FILL:
            prepared.reasons.append(f"its array covers {stored.area}")
            return prepared
        legacy = stored.kind == "array" and not stored.dynamic
        context = _Context(
            array=stored.kind == "array", keep=stored.kind == "array", sheet=place.sheet,
            rows=place.row - stored.origin.row, columns=place.column - stored.origin.column,
        )
        fit = (stored.area.rows, stored.area.columns) if stored.kind == "array" else (1, 1)
        try:
            items = formula_tree(stored.text)
            text = self._whole(items, context, None if stored.kind == "array" and not legacy else fit)
            prepared.text = "=" + text
            if len(text) > LONGEST:
                self._reason("it is too long once its names are written out")
            elif not prepared.reasons:
                formualizer.parse(prepared.text)
        except (UnreadableFormula, formualizer.ParserError, formualizer.TokenizerError) as problem:
            prepared.reasons.insert(0, f"its formula cannot be read: {problem}")
        return prepared

    def _whole(self, items: tuple[Node, ...], context: _Context, fit: tuple[int, int] | None) -> str:
        parts = significant(items)
        if parts and isinstance(parts[0], Text) and parts[0].text == "@" and len(parts) == 2:
            parts = parts[1:]
        only = parts[0] if len(parts) == 1 else None
        if isinstance(only, Call) and called_name(only.spelled):
            return self._our_call(only, context, fit)[0]
        text, array = self._expression(items, context)
        if fit is not None and (array or self._prepared.stored.kind == "array"):
            return f"{FIT}({fit[0]},{fit[1]},{text})"
        return text

    def _expression(self, items: Sequence[Node], context: _Context) -> tuple[str, bool]:
        """The text of an expression, and whether it may be an array."""
        alone = len(significant(tuple(items))) == 1
        joins = any(isinstance(item, Text) and item.joins_ranges for item in items)
        if any(isinstance(item, Text) and item.joins_ranges and item.text == ":" for item in items):
            self._prepared.functions.add(":")
        if joins:
            context = context.inside(keep=True)
        elif not alone:
            context = context.inside(keep=False)
        pieces: list[str] = []
        array = False
        for number, item in enumerate(items):
            before = items[number - 1] if number else None
            after = items[number + 1] if number + 1 < len(items) else None
            text, many = self._item(item, before, after, context)
            pieces.append(text)
            array = array or many
        return "".join(pieces), array

    def _item(  # noqa: PLR0911 - one exit for each kind of item
        self, item: Node, before: Node | None, after: Node | None, context: _Context
    ) -> tuple[str, bool]:
        """The text of one item between its neighbours, of which @ and # change what it means."""
        if isinstance(item, Text):
            taken = (item.text == "@" and (isinstance(after, Operand) or _calls_ours(after))) or (
                item.text == "#" and isinstance(before, Operand)
            )
            return "" if taken else item.text, False
        if isinstance(item, Operand):
            if _is_text(after, "#"):
                return self._spill(item.text, context), True
            one = context.inside(array=False, keep=False) if _is_text(before, "@") else context
            return self._operand(item.text, one)
        if isinstance(item, Group):
            text, array = self._expression(item.items, context)
            return f"({text})", array
        if isinstance(item, Call):
            if _is_text(before, "@") and _calls_ours(item):
                return self._our_call(item, context, (1, 1))
            return self._call(item, context)
        return item.text, True

    # --- operands ----------------------------------------------------------------------------------

    def _operand(  # noqa: PLR0911 - one exit for each kind of operand
        self, text: str, context: _Context
    ) -> tuple[str, bool]:
        if text.casefold().startswith("_xlpm."):
            return text, context.array
        if _EXTERNAL.match(text):
            self._reason(f"it refers to another workbook ({text})")
            return "#REF!", False
        sheet, body = split_sheet(text)
        reference = parse_reference(text)
        if reference is None and sheet is not None and ":" in sheet:
            self._reason(f"it refers to several sheets at once ({text})")
            return "#REF!", False
        if sheet is not None:
            known = self.book.sheet_name(sheet)
            if known is None:
                return "#REF!", False
            if reference is None:
                return self._name(body, known, text, context)
            reference = reference._replace(sheet=known)
        if reference is not None:
            return self._reference(reference.moved(context.rows, context.columns), context)
        if "[" in text:
            place = self._prepared.place
            area = structured_area(text, self.book.tables, place.sheet, place.row, place.column)
            return ("#REF!", False) if area is None else self._area(area, context)
        return self._name(text, context.sheet, text, context)

    def _reference(self, reference: Reference, context: _Context) -> tuple[str, bool]:
        area = reference.area(context.sheet)
        if reference.sheet is None and context.sheet != self._prepared.place.sheet:
            reference = reference._replace(sheet=context.sheet)
        if area.single or context.array or context.keep:
            self._prepared.areas.append(area)
            return str(reference), not area.single
        return self._crossed(area), False

    def _area(self, area: Area, context: _Context) -> tuple[str, bool]:
        if area.single or context.array or context.keep:
            self._prepared.areas.append(area)
            return area.absolute(), not area.single
        return self._crossed(area), False

    def _crossed(self, area: Area) -> str:
        """The one cell of a row or column that lies level with the formula, as in a plain cell."""
        place = self._prepared.place
        if area.columns == 1 and area.top <= place.row <= area.bottom:
            area = area._replace(top=place.row, bottom=place.row)
        elif area.rows == 1 and area.left <= place.column <= area.right:
            area = area._replace(left=place.column, right=place.column)
        else:
            return "#VALUE!"
        self._prepared.areas.append(area)
        return area.absolute()

    def _spill(self, text: str, context: _Context) -> str:
        reference = parse_reference(text)
        if reference is None:
            self._reason(f"it refers to a spilled range through {text}")
            return "#REF!"
        anchor = reference.moved(context.rows, context.columns)
        if anchor.sheet is not None:
            anchor = anchor._replace(sheet=self.book.sheet_name(anchor.sheet) or anchor.sheet)
        area = anchor.area(context.sheet)
        stored = self.book.formula(Place(area.sheet, area.top, area.left))
        self._prepared.areas.append(area if stored is None else stored.area)
        return f"{anchor}#"

    def _name(self, name: str, sheet: str, text: str, context: _Context) -> tuple[str, bool]:
        definition = self.book.definition(name, sheet)
        if definition is None:
            table = self.book.tables.get(name.casefold())
            if table is not None:
                rows = table.rows("#data", self._prepared.place.row)
                if rows is not None:
                    return self._area(table.area._replace(top=rows[0], bottom=rows[1]), context)
            self._reason(f"no name {text} is defined in the workbook")
            return "#NAME?", False
        if context.depth >= _DEEPEST_NAME:
            self._reason(f"the name {text} leads back to itself")
            return "#REF!", False
        place = self._prepared.place
        inner = _Context(  # a name's relative references are stored as seen from A1
            context.array, context.keep, place.sheet, place.row - 1, place.column - 1, context.depth + 1
        )
        inlined, array = self._expression(formula_tree(definition), inner)
        if parse_reference(definition) is not None:
            return inlined, array
        return f"({inlined})", array

    def _reason(self, text: str) -> None:
        if text not in self._prepared.reasons:
            self._prepared.reasons.append(text)

    # --- calls -------------------------------------------------------------------------------------

    def _call(  # noqa: PLR0911 - one exit for each kind of call
        self, call: Call, context: _Context
    ) -> tuple[str, bool]:
        if called_name(call.spelled):
            return self._our_call(call, context, None)
        name = _LIBRARY_PREFIX.sub("", call.spelled).strip().upper()
        if "!" in name:
            self._reason(f"it calls {call.spelled} from outside the workbook")
            return "#NAME?", False
        if name == "ANCHORARRAY" and len(call.arguments) == 1 and isinstance(call.arguments[0][0], Operand):
            return self._spill(call.arguments[0][0].text, context), True
        if name == "SINGLE" and len(call.arguments) == 1:
            return self._single(call, context)
        self._prepared.functions.add(name)
        if name in {"ROW", "COLUMN"}:
            return self._row_or_column(call, name, context)
        if name in natives.ELEMENTWISE or name in natives.BRANCHES:
            keep = context.keep and name in natives.BRANCHES
            inner = context.inside(keep=keep or context.array)
        elif name in natives.FORCES_ARRAYS:
            inner = context.inside(array=True, keep=True)
        else:
            inner = context.inside(keep=True)
        done = [self._expression(argument, inner) for argument in call.arguments]
        texts, many = ",".join(text for text, _ in done), any(array for _, array in done)
        if name in natives.ELEMENTWISE and many:
            return f'{MAP}("{name}",{texts})', True
        array = name in natives.GIVES_ARRAYS or (name in natives.BRANCHES and many)
        return f"{call.spelled.strip()}({texts})", array

    def _single(self, call: Call, context: _Context) -> tuple[str, bool]:
        parts = significant(call.arguments[0])
        if len(parts) == 1 and isinstance(parts[0], Call) and called_name(parts[0].spelled):
            return self._our_call(parts[0], context, (1, 1))
        text, array = self._expression(call.arguments[0], context.inside(array=False, keep=False))
        return (f"{FIT}(1,1,{text})" if array else f"({text})"), False

    def _row_or_column(self, call: Call, name: str, context: _Context) -> tuple[str, bool]:
        done = [self._expression(argument, context.inside(keep=True)) for argument in call.arguments]
        texts = ",".join(text for text, _ in done)
        reference = parse_reference(texts)
        if context.array and reference is not None and reference.last is not None:
            area = reference.area(context.sheet)
            if name == "ROW":
                return f"SEQUENCE({area.rows},1,{area.top})", True
            return f"SEQUENCE(1,{area.columns},{area.left})", True
        return f"{name}({texts})", False

    def _our_call(self, call: Call, context: _Context, fit: tuple[int, int] | None) -> tuple[str, bool]:
        name = called_name(call.spelled) or ""
        if name not in self.names:
            near = near_names(name, self.names)
            self._reason(f"it calls TF.{name}, which is no function of this version; near names: {near}")
        number = len(self.sites)
        self.sites.append(Site(number, self._prepared.place, name, call.spelled, frozenset(), ()))
        inner = context.inside(array=True, keep=True)
        omitted: set[int] = set()
        computed: set[int] = set()
        texts, written, array = [str(number)], [], name in self.tables
        for position, argument in enumerate(call.arguments):
            written.append(as_written(argument, context.rows, context.columns).strip())
            if not significant(argument):
                omitted.add(position)
                texts.append("0")
                continue
            text, many = self._expression(argument, inner)
            texts.append(text)
            array = array or many
            if not many and self._is_formula_cell(text, context):
                computed.add(position)
        site = Site(
            number, self._prepared.place, name, call.spelled, frozenset(omitted), tuple(written), fit,
            frozenset(computed),
        )
        self.sites[number] = site
        self._prepared.sites.append(site)
        return f"{SITE}({','.join(texts)})", array and fit != (1, 1)

    def _is_formula_cell(self, text: str, context: _Context) -> bool:
        reference = parse_reference(text)
        if reference is None or reference.last is not None:
            return False
        area = reference.area(context.sheet)
        return self.book.formula(Place(area.sheet, area.top, area.left)) is not None


def _is_text(item: Node | None, text: str) -> bool:
    return isinstance(item, Text) and item.text == text


def _calls_ours(item: Node | None) -> bool:
    return isinstance(item, Call) and called_name(item.spelled) is not None
