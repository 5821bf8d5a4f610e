"""Decodes the tables of test/data by regular expressions, independently of src/decode, and prints what the tests compare.

Usage: python3 test/reference/decode/decode_tables.py > test/reference/decode/tables.json
"""

import json
import re
from fractions import Fraction
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2] / "data"
TOKEN = re.compile(r"[+-]?\d+\.?\d*|[@A-Ia-i%J-Rj-rS-Zs]\d*\.?\d*|\.\d+")
PSEUDO = {}
for first, characters in (("+0", "@ABCDEFGHI"), ("-1", "abcdefghi")):
    for index, character in enumerate(characters):
        PSEUDO[character] = ("sqz", first[0], int(first[1]) + index)
for first, characters in (("+0", "%JKLMNOPQR"), ("-1", "jklmnopqr")):
    for index, character in enumerate(characters):
        PSEUDO[character] = ("dif", first[0], int(first[1]) + index)
for index, character in enumerate("STUVWXYZs"):
    PSEUDO[character] = ("dup", "+", 1 + index)


def decode(lines):
    values, ends_in_difference = [], False
    for line in lines:
        line = line.split("$$")[0].strip()
        if not line:
            continue
        tokens = TOKEN.findall(line)[1:]
        step, kind = None, None
        for place, token in enumerate(tokens):
            form, sign, digit = PSEUDO.get(token[0], ("sqz", "", ""))
            number = Fraction(f"{sign}{digit}{token[1:]}" if token[0] in PSEUDO else token)
            if form == "dup":
                for _ in range(int(number) - 1):
                    values.append(values[-1] + (step if kind == "dif" else 0))
            elif form == "dif":
                step, kind = number, "dif"
                values.append(values[-1] + number)
            elif place == 0 and ends_in_difference:
                assert values[-1] == number, (line, values[-1], number)
                kind = "check"
            else:
                values.append(number)
                kind = "sqz"
        ends_in_difference = kind == "dif"
    return values


def tables(text):
    current = None
    for line in text.splitlines():
        if line.lstrip().startswith("##"):
            if current is not None:
                yield current
            label = re.sub(r"[\s\-/_]", "", line.split("=")[0]).upper()
            current = [] if label in ("##XYDATA", "##DATATABLE") else None
        elif current is not None:
            current.append(line)


def summary(values):
    show = lambda value: int(value) if value.denominator == 1 else float(value)
    return {
        "points": len(values),
        "first": [show(value) for value in values[:4]],
        "last": [show(value) for value in values[-3:]],
        "min": show(min(values)),
        "max": show(max(values)),
        "sum": show(sum(values)),
        "weightedSum": show(sum(value * (index % 97) for index, value in enumerate(values))),
    }


files = sorted(path for path in ROOT.rglob("*") if path.suffix in (".dx", ".jdx"))
found = {
    str(path.relative_to(ROOT)): [summary(decode(table)) for table in tables(path.read_text("latin-1"))] for path in files
}
print(json.dumps(found, indent=1))
