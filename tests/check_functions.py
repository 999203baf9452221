"""Measures how long functions are: check_functions.py FOLDER [MOST].

Counts every function that is defined in include/, src/ and bindings/ from the first line of its
declaration to its closing brace; a lambda counts as a part of the function around it. Prints the
number of functions, the middle and the ninetieth percentile of their lines, and the longest five;
exits 1 unless nine of ten have fewer than 40 lines.

The reading is by tokens: comments, texts and preprocessor lines are dropped, braces and
parentheses are matched, and the words before a brace tell what it opens.
"""

import re
import statistics
import sys
from pathlib import Path

MOST = 40

TOKEN = re.compile(r"""
    (?P<comment>//[^\n]*|/\*.*?\*/)
  | (?P<raw>(?:u8|[uUL])?R"(?P<mark>[^(\s]*)\(.*?\)(?P=mark)")
  | (?P<text>(?:u8|[uUL])?"(?:\\.|[^"\\\n])*")
  | (?P<number>\.?\d(?:'?[\w.]|[eEpP][+-])*)
  | (?P<letter>(?:u8|[uUL])?'(?:\\.|[^'\\\n])+')
  | (?P<preprocessor>^[ \t]*\#(?:\\\n|[^\n])*)
  | (?P<word>[A-Za-z_]\w*)
  | (?P<sign>::|->|&&|\|\||[=!<>]=|[^\s\w])
""", re.X | re.S | re.M)
CLOSES = {"(": ")", "[": "]", "{": "}"}
TYPE_WORDS = {"class", "struct", "union", "enum"}


class Token:
    def __init__(self, text, kind, line):
        self.text, self.kind, self.line = text, kind, line


def tokens_of(source):
    found, line, done = [], 1, 0
    for match in TOKEN.finditer(source):
        line += source.count("\n", done, match.start())
        done = match.start()
        if match.lastgroup == "mark" or match["raw"] is not None:
            found.append(Token('""', "text", line))
        elif match.lastgroup not in ("comment", "preprocessor"):
            found.append(Token(match[0], match.lastgroup, line))
    return found


def closing(tokens, start):
    """Index of the token that closes the bracket at `start`."""
    open_ones = []
    for i in range(start, len(tokens)):
        text = tokens[i].text
        if text in CLOSES and tokens[i].kind == "sign":
            open_ones.append(CLOSES[text])
        elif text in (")", "]", "}"):
            if text != open_ones.pop():
                raise ValueError(f"line {tokens[i].line}: unexpected {text}")
            if not open_ones:
                return i
    raise ValueError(f"line {tokens[start].line}: {tokens[start].text} is never closed")


def after_angles(tokens, start):
    """Index after the > that closes the < at `start`."""
    depth, i = 0, start
    while True:
        text = tokens[i].text
        if text in ("(", "[", "{"):
            i = closing(tokens, i)
        depth += {"<": 1, ">": -1}.get(text, 0)
        i += 1
        if depth == 0:
            return i


class Statement:
    """What has been read since the last ; or } at this level, each bracket as its first token."""

    def __init__(self):
        self.words, self.first_line = [], None
        self.before_parenthesis = ""
        self.parentheses = self.assigns = self.initialises = False

    def add(self, token, previous):
        if self.first_line is None:
            self.first_line = token.line
        self.words.append(token.text)
        if token.text == "(":
            self.parentheses, self.before_parenthesis = True, previous
        elif token.text == "=" and previous != "operator":
            self.assigns = True
        elif token.text == ":" and self.parentheses:
            self.initialises = True  # a constructor's list of members

    def opens(self):
        """What a brace after these words opens: scope, function, lambda or value."""
        words, last = self.words, self.words[-1] if self.words else ""
        if self.assigns:
            return "lambda" if "[" in words[words.index("="):] else "value"
        if self.initialises and last not in ("(", "{", "try"):
            return "value"  # of a member
        if last == "(" and self.before_parenthesis == "requires" and words.count("requires") > 1:
            return "value"  # a requires expression, not the clause after a declaration
        if self.parentheses and (last == "(" or words[0] not in TYPE_WORDS):
            return "function"
        names_scope = not words or words[0] == "extern" or TYPE_WORDS & set(words) or (
            "namespace" in words)
        return "scope" if names_scope else "value"


class Reader:
    """Walks through a source's tokens and notes the functions."""

    def __init__(self, source):
        self.tokens, self.at = tokens_of(source), 0
        self.statement, self.found = Statement(), []

    def text(self, index):
        return self.tokens[index].text if 0 <= index < len(self.tokens) else ""

    def read(self):
        while self.at < len(self.tokens):
            self.step()
            self.at += 1
        return self.found

    def step(self):
        token, previous = self.tokens[self.at], self.text(self.at - 1)
        if token.text in (";", "}") or (
                token.text == ":" and previous in ("public", "protected", "private")):
            self.statement = Statement()
        elif token.text == "{":
            self.brace()
        else:
            self.statement.add(token, previous)
            self.skip(token)

    def skip(self, token):
        """To the end of what is read as one: a bracket, or a template's list of parameters."""
        if token.text in ("(", "["):
            self.at = closing(self.tokens, self.at)
        elif token.text == "template" and self.text(self.at + 1) == "<":
            self.at = after_angles(self.tokens, self.at + 1) - 1
            self.statement.words.clear()

    def brace(self):
        what, first_line = self.statement.opens(), self.statement.first_line
        if what == "scope":
            self.statement = Statement()
            return
        if what == "value" or what == "lambda":
            self.statement.add(self.tokens[self.at], self.text(self.at - 1))
        self.at = closing(self.tokens, self.at)
        if what == "function":
            self.statement = Statement()
            while self.text(self.at + 1) == "catch":  # of a function that is one try block
                self.at = closing(self.tokens, closing(self.tokens, self.at + 2) + 1)
        if what in ("function", "lambda"):
            self.found.append((first_line, self.tokens[self.at].line))


def functions_in(source):
    """(first line, last line) of every function defined in a C++ or C source."""
    return Reader(source).read()


def functions_below(root):
    for folder in ("include", "src", "bindings"):
        for file in sorted((root / folder).rglob("*")):
            if file.suffix not in (".hpp", ".cpp", ".inl", ".h", ".c"):
                continue
            for first, last in functions_in(file.read_text(encoding="utf-8")):
                yield last - first + 1, f"{file.relative_to(root).as_posix()}:{first}"


def main():
    root = Path(sys.argv[1]).resolve()
    found = sorted(functions_below(root), reverse=True)
    lengths = sorted(length for length, _ in found)
    if not lengths:
        print("no function found")
        return 1
    ninetieth = lengths[max(0, -(-9 * len(lengths) // 10) - 1)]
    print(f"{len(lengths)} functions; lines: half have at most {statistics.median_low(lengths)}, "
          f"nine of ten at most {ninetieth}; the longest:")
    for length, place in found[:5]:
        print(f"  {length:3d}  {place}")
    return 0 if ninetieth < MOST else 1


if __name__ == "__main__":
    sys.exit(main())
