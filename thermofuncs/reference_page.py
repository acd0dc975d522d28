"""The reference page of the worksheet functions, written from their declarations."""

from __future__ import annotations

from html import escape

from thermofuncs.catalogue import FUNCTIONS, GROUPS, Argument, Function, evaluate
from thermofuncs.errors import CellError

_STYLE = """
body { font: 16px/1.5 system-ui, sans-serif; max-width: 60rem; margin: 2rem auto; padding: 0 1rem; }
code { font-family: ui-monospace, monospace; }
table { border-collapse: collapse; margin: .5rem 0; }
td, th { border: 1px solid #888; padding: .2rem .6rem; text-align: left; vertical-align: top; }
h3 { margin: 2rem 0 .3rem; }
"""
_CAUTION = (
    "Where a result can hurt someone, a qualified person checks it first, and local codes and licensed "
    "practice come before it."
)


def reference_page() -> str:
    """The page, as HTML that needs no other file."""
    parts = [
        "<!doctype html>",
        '<html lang="en"><head><meta charset="utf-8"><title>Worksheet functions</title>',
        f"<style>{_STYLE}</style></head><body><h1>Worksheet functions</h1>",
        f"<p>{len(FUNCTIONS)} functions for reaction thermochemistry. {_CAUTION}</p><ul>",
    ]
    parts += [f'<li><a href="#{_anchor(group)}">{escape(group)}</a></li>' for group, _ in GROUPS]
    parts.append("</ul>")
    for group, functions in GROUPS:
        parts.append(f'<h2 id="{_anchor(group)}">{escape(group)}</h2>')
        parts += [_function(function) for function in functions]
    parts.append("</body></html>\n")
    return "\n".join(parts)


def _anchor(text: str) -> str:
    return "".join(c if c.isalnum() else "-" for c in text.lower())


def _function(function: Function) -> str:
    unit = "" if function.result_unit in {"1", "text", "table"} else f" Unit: {escape(function.result_unit)}."
    arguments = "".join(_argument(argument) for argument in function.arguments)
    table = ""
    if arguments:
        table = f"<table><tr><th>argument</th><th>meaning</th><th>unit</th><th></th></tr>{arguments}</table>"
    return (
        f'<h3 id="{function.name}"><code>{escape(function.signature)}</code></h3>'
        f"<p>{escape(function.summary)}{unit}</p>{table}{_example(function)}"
    )


def _argument(argument: Argument) -> str:
    note = "may be left out" if argument.optional else "any number" if argument.variadic else ""
    cells = (argument.name, argument.meaning, argument.unit, note)
    return "<tr>" + "".join(f"<td>{escape(cell)}</td>" for cell in cells) + "</tr>"


def _example(function: Function) -> str:
    written = ", ".join(_written(value) for value in function.example)
    call = f"=TF.{function.name}({written})"
    result = evaluate(function.name, list(function.example))
    return f"<p>Example: <code>{escape(call)}</code> gives {_result(result)}</p>"


def _written(value: object) -> str:
    if value is None:
        return ""
    if isinstance(value, bool):
        return str(value).upper()
    if isinstance(value, str):
        return '"' + value.replace('"', '""') + '"'
    if isinstance(value, list | tuple):
        rows = [row if isinstance(row, list | tuple) else [row] for row in value]
        return "{" + ";".join(",".join(_written(item) for item in row) for row in rows) + "}"
    return f"{value:g}" if isinstance(value, float) else str(value)


def _result(value: object) -> str:
    if isinstance(value, list):
        lines = ("".join(f"<td>{_result(item)}</td>" for item in row) for row in value)
        return "<table>" + "".join(f"<tr>{line}</tr>" for line in lines) + "</table>"
    if isinstance(value, CellError):
        return f"<code>{escape(value.value)}</code>"
    return f"<code>{escape(repr(value) if isinstance(value, float) else str(value or ''))}</code>"
