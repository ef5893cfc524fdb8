"""What the reference scripts share: reading the handbook's tables, writing figures."""

import json
import re
from pathlib import Path

HERE = Path(__file__).resolve().parent
DATA = HERE / "data"
HANDBOOK = HERE.parent.parent / "lang" / "handbook"

TABLE = re.compile(r"\btable\s*\{")
ROW = re.compile(r"^\s*([0-9.e+-]+) nm((?: [0-9.e+-]+)+),?\s*$")


def handbook_rows(name):
    """The rows of the first table in a handbook file: [[wavelength in nm, values ...], ...]."""
    rows = []
    inside = False
    for line in (HANDBOOK / f"{name}.coat").read_text(encoding="utf-8").splitlines():
        if line.lstrip().startswith("#"):
            continue
        if TABLE.search(line):
            inside = True
        elif inside and "}" in line:
            break
        elif inside:
            match = ROW.match(line)
            if match is None:
                raise ValueError(f"{name}: not a row of a table: {line!r}")
            rows.append([float(match[1])] + [float(v) for v in match[2].split()])
    if not rows:
        raise ValueError(f"{name}: no table")
    return rows


def double(value):
    """An mpmath number as the nearest double: the same on every machine."""
    if -1e-40 < value < 0:
        return 0.0  # what the last of 50 digits leaves of a zero
    return float(value)


def document(content):
    """JSON text with one entry of the outermost lists a line, so that a change shows as a line."""
    lines = ["{"]
    keys = list(content)
    for key in keys:
        last = "" if key == keys[-1] else ","
        value = content[key]
        if isinstance(value, list) and value and isinstance(value[0], (dict, list)):
            lines.append(f"  {json.dumps(key)}: [")
            for i, entry in enumerate(value):
                comma = "" if i == len(value) - 1 else ","
                lines.append(f"    {json.dumps(entry, allow_nan=False)}{comma}")
            lines.append(f"  ]{last}")
        else:
            lines.append(f"  {json.dumps(key)}: {json.dumps(value, allow_nan=False)}{last}")
    lines.append("}")
    return "\n".join(lines) + "\n"
