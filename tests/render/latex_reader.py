"""An independent reader of the printed formulas: LaTeX text to a number, sharing nothing with the printer.

Reads the left-to-right text a reviewer sees; letters are looked up, longest first; units (upright)
are skipped.
"""

import math
import re

NAMED = {
    r"\sin": math.sin,
    r"\cos": math.cos,
    r"\tan": math.tan,
    r"\arctan": math.atan,
    r"\ln": math.log,
    r"\log_{10}": math.log10,
    r"\min": min,
    r"\max": max,
}
SIGNS = {"<": lambda a, b: a < b, r"\le": lambda a, b: a <= b, ">": lambda a, b: a > b, r"\ge": lambda a, b: a >= b}


class Reader:
    """Recursive descent over the text."""

    def __init__(self, text, letters):
        self.text, self.at = text, 0
        self.letters = sorted(letters.items(), key=lambda pair: -len(pair[0]))

    def skip(self):
        while match := re.match(r"\s+|\\,\\mathrm\{(?:[^{}]|\{[^{}]*\})*\}|\\quad", self.text[self.at :]):
            self.at += match.end()

    def peek(self, token):
        self.skip()
        return self.text.startswith(token, self.at)

    def take(self, token):
        if self.peek(token):
            self.at += len(token)
            return True
        return False

    def need(self, token):
        assert self.take(token), f"{token!r} wanted at {self.text[self.at : self.at + 30]!r}"

    def group(self):
        self.need("{")
        value = self.sum()
        self.need("}")
        return value

    def sum(self):
        value = -self.product() if self.take("-") else self.product()
        while self.peek("+") or self.peek("-"):
            sign = 1 if self.take("+") else -1
            self.take("-")
            value = value + sign * self.product()
        return value

    def product(self):
        value = self.power()
        while self.take(r"\cdot") or self.take(r"\times"):
            value = value * self.power()
        return value

    def power(self):
        value = self.atom()
        if self.take("^"):
            value = value ** self.group()
        return value

    def atom(self):  # noqa: C901, PLR0911 - one branch for each thing a formula is made of
        self.skip()
        for letter, value in self.letters:
            rest = self.text[self.at + len(letter) :]
            if self.text.startswith(letter, self.at) and not (
                letter[-1].isalpha() and rest[:1].isalpha() and letter[0] == "\\"
            ):
                self.at += len(letter)
                return value
        if match := re.match(r"\d+(?:\.\d+)?", self.text[self.at :]):
            self.at += match.end()
            return float(match[0])
        if self.take(r"\frac"):
            above = self.group()
            return above / self.group()
        if self.take(r"\sqrt"):
            return math.sqrt(self.group())
        if self.take(r"\pi"):
            return math.pi
        if self.take(r"\left|"):
            value = self.sum()
            self.need(r"\right|")
            return abs(value)
        if self.peek(r"\left("):
            return self.bracket()[0]
        if self.take(r"\begin{cases}"):
            return self.cases()
        for name, function in NAMED.items():
            if self.take(name):
                return function(*self.bracket())
        if self.take(r"\mathrm{e}"):
            self.need("^")
            return math.exp(self.group())
        raise AssertionError(f"cannot read {self.text[self.at : self.at + 30]!r}")

    def bracket(self):
        self.need(r"\left(")
        values = [self.sum()]
        while self.take(","):
            values.append(self.sum())
        self.need(r"\right)")
        return values

    def cases(self):
        rows = self.text[self.at :].partition(r"\end{cases}")
        self.at = len(self.text) - len(rows[2])
        for row in rows[0].split(r"\\"):
            value, condition = row.split("&")
            letters = dict(self.letters)
            if r"\text{otherwise}" in condition or holds(condition.replace(r"\text{if }", ""), letters):
                return read(value, letters)
        raise AssertionError("no case holds")


def read(text, letters):
    """Evaluate one printed expression."""
    reader = Reader(text, letters)
    value = reader.sum()
    reader.skip()
    assert reader.at == len(text), f"left over: {text[reader.at :]!r}"
    return value


def holds(text, letters):
    """Evaluate one printed comparison."""
    left, sign, right = re.split(r"(\\le(?!ft)|\\ge|<|>)", text)
    return SIGNS[sign](read(left, letters), read(right, letters))


def read_lines(lines, letters):
    """Evaluate the lines of a formula one after the other; the last one is the result."""
    known = dict(letters)
    value = math.nan
    for line in lines:
        left, _, expression = line.partition(" = ")
        value = known[left] = read(expression, known)
    return value
