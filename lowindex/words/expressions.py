"""Expressions over named values: exact rationals, comparisons, conditions.

    sum        a + b - c          product    2 n, a * b, a / b (a rational)     a mod b
    function   gcd(a, b), abs(a), min(a, b), max(a, b)
    condition  a <= b < c, a = b, a != b (or ≠, ≤, ≥), and, or, not, parentheses
    text       "in quotes", or a name that is no value, stands for itself
"""

from __future__ import annotations

import re
from collections.abc import Callable, Mapping
from fractions import Fraction
from math import gcd

from lowindex.errors import NotationError
from lowindex.words.notation import Reader

Value = Fraction | str | bool | None

DEEPEST = 50
LARGEST = 10**9

_TOKEN = re.compile(r"\s*(?:(\d+)|([^\W\d_][\w]*)|\"([^\"\n]*)\"|(<=|>=|!=|==|[-+*/(),=<>≤≥≠−]))")


def _gcd(*values: Fraction) -> Fraction:
    if any(value.denominator != 1 for value in values):
        raise ValueError("gcd needs integers")
    return Fraction(gcd(*map(int, values)))


FUNCTIONS: dict[str, Callable[..., Fraction]] = {"gcd": _gcd, "abs": abs, "min": min, "max": max}

WORDS = frozenset({"and", "or", "not", "mod", *FUNCTIONS})


class Expression:
    """An expression in `text` from `start` to `end`, evaluated as it is read; NotationError points into the text."""

    def __init__(self, text: str, values: Mapping[str, Value], *, start: int = 0, end: int | None = None, texts: bool = False) -> None:
        self.reader = Reader(text)
        self.text = text
        self.values = values
        self.end = len(text) if end is None else end
        self.at = start
        self.texts = texts
        self.depth = 0
        self._next()

    def error(self, message: str) -> NotationError:
        """An error at the token in hand."""
        return self.reader.error(message, self.place)

    def _next(self) -> None:
        while self.at < self.end and self.text[self.at].isspace():
            self.at += 1
        self.place = self.at
        match = _TOKEN.match(self.text, self.at, self.end)
        if match is None:
            if self.at < self.end:
                raise self.reader.error(f"expected a number, a name or an operator, found {self.text[self.at]!r}", self.at)
            self.kind, self.token = "end", ""
            return
        number, name, quoted, sign = match.groups()
        if number is not None:
            self.kind, self.token = "number", number
        elif name is not None:
            self.kind, self.token = "name", name
        elif quoted is not None:
            self.kind, self.token = "text", quoted
        else:
            self.kind, self.token = "sign", {"−": "-", "≤": "<=", "≥": ">=", "≠": "!=", "==": "="}.get(sign, sign)
        self.at = match.end()

    def _is(self, *tokens: str) -> bool:
        return self.kind in ("sign", "name") and self.token in tokens

    def condition(self) -> bool:
        """The value of a whole condition."""
        value = self._or()
        if self.kind != "end":
            raise self.error(f"expected the end of the condition, found {self.token!r}")
        if not isinstance(value, bool):
            raise self.error("expected a condition such as n > 2, found a value")
        return value

    def integer(self) -> int:
        """The value of a whole expression that must be an integer."""
        start = self.place
        value = self._sum()
        if self.kind != "end":
            raise self.error(f"expected the end of the expression, found {self.token!r}")
        if not isinstance(value, Fraction) or value.denominator != 1:
            raise self.reader.error(f"expected an integer, found {value}", start)
        return int(value)

    def _or(self) -> Value:
        value = self._and()
        while self._is("or"):
            self._next()
            other = self._and()
            value = self._truth(value) or self._truth(other)
        return value

    def _and(self) -> Value:
        value = self._not()
        while self._is("and"):
            self._next()
            other = self._not()
            value = self._truth(value) and self._truth(other)
        return value

    def _not(self) -> Value:
        if self._is("not"):
            self._next()
            return not self._truth(self._not())
        return self._comparison()

    def _truth(self, value: Value) -> bool:
        if not isinstance(value, bool):
            raise self.error("expected a condition such as n > 2, found a value")
        return value

    def _comparison(self) -> Value:
        left = self._sum()
        if not self._is("<", "<=", ">", ">=", "=", "!="):
            return left
        result = True
        while self._is("<", "<=", ">", ">=", "=", "!="):
            sign = self.token
            self._next()
            right = self._sum()
            result = self._compared(left, sign, right) and result
            left = right
        return result

    def _compared(self, left: Value, sign: str, right: Value) -> bool:
        if sign == "=":
            return left == right
        if sign == "!=":
            return left != right
        if left is None or right is None:
            return False
        if not isinstance(left, Fraction) or not isinstance(right, Fraction):
            raise self.error(f"{sign} compares numbers only")
        return {"<": left < right, "<=": left <= right, ">": left > right, ">=": left >= right}[sign]

    def _number(self, value: Value) -> Fraction:
        if not isinstance(value, Fraction) or isinstance(value, bool):
            raise self.error(f"expected a number, found {value!r}")
        if abs(value) > LARGEST:
            raise self.error(f"numbers above {LARGEST} are not used")
        return value

    def _sum(self) -> Value:
        value = self._product()
        while self._is("+", "-"):
            sign = 1 if self.token == "+" else -1
            self._next()
            value = self._number(value) + sign * self._number(self._product())
        return value

    def _product(self) -> Value:
        value = self._unary()
        while self._is("*", "/", "mod", "(") or self.kind == "number" or self._begins_a_factor():
            sign = self.token if self._is("*", "/", "mod") else "*"
            if self._is("*", "/", "mod"):
                self._next()
            place = self.place
            first, other = self._number(value), self._number(self._unary())
            if sign != "*" and other == 0:
                raise self.reader.error("division by zero", place)
            value = first * other if sign == "*" else first / other if sign == "/" else first % other
        return value

    def _begins_a_factor(self) -> bool:
        """Whether a name multiplies what stands before it; where names may be texts it does not."""
        return self.kind == "name" and self.token not in WORDS and not self.texts

    def _unary(self) -> Value:
        if self._is("-"):
            self._next()
            return -self._number(self._unary())
        return self._atom()

    def _atom(self) -> Value:
        kind, token = self.kind, self.token
        if kind == "number":
            self._next()
            if len(token) > 10:
                raise self.error(f"numbers above {LARGEST} are not used")
            return Fraction(int(token))
        if kind == "text":
            self._next()
            return token
        if kind == "sign" and token == "(":
            self.depth += 1
            if self.depth > DEEPEST:
                raise self.error(f"brackets are nested more than {DEEPEST} deep")
            self._next()
            value = self._or()
            self._close()
            self.depth -= 1
            return value
        if kind == "name" and token in FUNCTIONS:
            return self._call(token)
        if kind == "name" and token not in WORDS:
            if token in self.values:
                self._next()
                return self.values[token]
            if self.texts:
                self._next()
                return token
            raise self.error(f"{token} has no value; known are: {', '.join(self.values) or 'none'}")
        raise self.error(f"expected a number or a name, found {token!r}" if token else "expected a number or a name, found the end")

    def _call(self, name: str) -> Fraction:
        self._next()
        if not self._is("("):
            raise self.error(f"expected ( after {name}")
        arguments = []
        while True:
            self._next()
            arguments.append(self._number(self._sum()))
            if not self._is(","):
                break
        self._close()
        if len(arguments) < (1 if name == "abs" else 2) or (name == "abs" and len(arguments) > 1):
            raise self.error(f"{name} has the wrong number of arguments")
        try:
            return FUNCTIONS[name](*arguments)
        except ValueError as error:
            raise self.error(str(error)) from None

    def _close(self) -> None:
        if not self._is(")"):
            raise self.error("expected )")
        self._next()
