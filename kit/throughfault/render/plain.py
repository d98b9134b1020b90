"""Formula trees as plain text for a terminal."""

from __future__ import annotations

import re
import unicodedata
from typing import Any

from throughfault.declare import Cell, Symbol
from throughfault.declare.formula import CONSTANTS, Binary, Call, Choice, Compare, Name, Negative, Node, Number

__all__ = ["formula_text", "letter_text"]

SUM, PRODUCT, POWER, ATOM = range(4)
_SIGN = {"+": " + ", "-": " \N{MINUS SIGN} ", "*": "\N{MIDDLE DOT}", "/": "/", "**": "^"}
_COMPARE = {"<": "<", "<=": "≤", ">": ">", ">=": "≥"}
_NAMED = {"atan": "arctan", "log": "ln", "exp": "exp", "sqrt": "√"}
_ACCENT = {"hat": "\N{COMBINING CIRCUMFLEX ACCENT}", "dot": "\N{COMBINING DOT ABOVE}", "bar": "\N{COMBINING MACRON}"}
_COMMANDS = {
    "imath": "i", "jmath": "j", "ell": "\N{SCRIPT SMALL L}", "sqrt": "√", "cdot": "·", "varphi": "φ", "infty": "∞",
    "lambda": "λ",
}  # fmt: skip
_ACCENTED = re.compile(r"\\(hat|dot|bar)\{([^{}]*)\}")
_UPRIGHT = re.compile(r"\\(?:mathrm|text|operatorname|mathit)\{([^{}]*)\}")
_COMMAND = re.compile(r"\\([A-Za-z]+)\s*")


def _command(match: re.Match[str]) -> str:
    name = match[1]
    if name in _COMMANDS:
        return _COMMANDS[name]
    size = "CAPITAL" if name[0].isupper() else "SMALL"
    try:
        return unicodedata.lookup(f"GREEK {size} LETTER {name.removeprefix('var').upper()}")
    except KeyError:
        return name


def letter_text(latex: str) -> str:
    """Write the letter of a symbol without LaTeX, e.g. ``θ_1``, ``î``."""
    text = _ACCENTED.sub(lambda m: _COMMAND.sub(_command, m[2]) + _ACCENT[m[1]], latex)
    text = _COMMAND.sub(_command, _UPRIGHT.sub(r"\1", text).replace(r"\,", " "))
    text = re.sub(r"\{([^{}]*)\}", r"\1", text)
    return unicodedata.normalize("NFC", text.replace("{", "").replace("}", ""))


class _Printer:
    def __init__(self, cell: Cell[Any]) -> None:
        self.cell = cell

    def within(self, node: Node, least: int) -> str:
        text, binds = self.node(node)
        return text if binds >= least else f"({text})"

    def node(self, node: Node) -> tuple[str, int]:
        match node:
            case Number(text=text):
                return text.removesuffix(".0"), ATOM
            case Name(term=term):
                return ("π", ATOM) if term in CONSTANTS else self.letter(self.cell.symbol(term))
            case Negative(node=inner):
                return f"\N{MINUS SIGN}{self.within(inner, PRODUCT)}", SUM
            case Binary(sign=sign, left=left, right=right):
                return self.binary(sign, left, right)
            case Call():
                return self.call(node), ATOM
            case Choice(test=test, then=then, otherwise=otherwise):
                text = f"{self.node(then)[0]} if {self.compare(test)}, otherwise {self.node(otherwise)[0]}"
                return text, SUM - 1

    def call(self, node: Call) -> str:
        inside = ", ".join(self.node(a)[0] for a in node.arguments)
        if node.function == "sqrt" and isinstance(node.arguments[0], Number):
            return f"√{inside}"
        return f"{_NAMED.get(node.function, node.function)}({inside})"

    def binary(self, sign: str, left: Node, right: Node) -> tuple[str, int]:
        level = {"+": SUM, "-": SUM, "*": PRODUCT, "/": PRODUCT}.get(sign, POWER)
        first = self.within(left, ATOM if level == POWER else level)
        return f"{first}{_SIGN[sign]}{self.within(right, ATOM if level == POWER else level + 1)}", level

    def letter(self, symbol: Symbol) -> tuple[str, int]:
        text = letter_text(symbol.latex)
        return text, ATOM if re.fullmatch(r"\w+", unicodedata.normalize("NFC", text)) else SUM - 1

    def compare(self, test: Compare) -> str:
        return f"{self.node(test.left)[0]} {_COMPARE[test.sign]} {self.node(test.right)[0]}"


def formula_text(cell: Cell[Any]) -> list[str]:
    """Write the formula of a cell as plain text, one line for each term and the result."""
    printer = _Printer(cell)
    left = (cell.result if line.term is None else cell.terms[line.term] for line in cell.formula.lines)
    return [
        f"{letter_text(symbol.latex)} = {printer.node(line.node)[0]}"
        for symbol, line in zip(left, cell.formula.lines, strict=True)
    ]
