"""Runs every reference script and writes data/; with --check, fails when a file would differ.

Figures from arbitrary precision must be equal to the last digit.  Those that pass
through numpy or scipy may differ by the script's TOLERANCE, because the order of
their sums depends on the machine; a file within it is left as it is.
"""

import argparse
import importlib
import json
import sys
import time

from common import DATA

SCRIPTS = [
    "stacks",
    "closed_forms",
    "abeles_refnx",
    "pchip",
    "dispersion",
    "tauc_lorentz",
    "mixtures",
    "spectra",
    "means",
    "extremes",
    "cone",
    "colours",
    "phases",
    "graded",
    "facets",
    "promises",
    "parts",
    "yields",
]


def difference(old, new, tolerance, place=""):
    """The first place where two documents differ, or None."""
    if isinstance(old, bool) or isinstance(new, bool) or old is None or new is None:
        return None if old is new else f"{place}: {old} became {new}"
    if isinstance(old, (int, float)) and isinstance(new, (int, float)):
        if abs(old - new) <= tolerance * max(1.0, abs(old)):
            return None
        return f"{place}: {old!r} became {new!r}"
    if type(old) is not type(new):
        return f"{place}: another kind of value"
    if isinstance(old, dict):
        if list(old) != list(new):
            return f"{place}: other keys"
        pairs = ((old[key], new[key], f"{place}.{key}") for key in old)
    elif isinstance(old, list):
        if len(old) != len(new):
            return f"{place}: {len(old)} entries became {len(new)}"
        pairs = ((a, b, f"{place}[{i}]") for i, (a, b) in enumerate(zip(old, new)))
    else:
        return None if old == new else f"{place}: {old!r} became {new!r}"
    for a, b, where in pairs:
        found = difference(a, b, tolerance, where)
        if found:
            return found
    return None


def main():
    options = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    options.add_argument("--check", action="store_true", help="write nothing, only compare")
    options.add_argument("scripts", nargs="*", metavar="SCRIPT", help="some of: " + ", ".join(SCRIPTS))
    given = options.parse_args()
    unknown = set(given.scripts) - set(SCRIPTS)
    if unknown:
        options.error("no such script: " + ", ".join(sorted(unknown)))

    DATA.mkdir(exist_ok=True)
    written = set()
    failed = False
    for name in given.scripts or SCRIPTS:
        started = time.monotonic()
        script = importlib.import_module(name)
        for file, text in script.make().items():
            path = DATA / file
            written.add(file)
            old = path.read_text(encoding="utf-8") if path.exists() else None
            found = "there is no such file yet"
            if old is not None:
                found = difference(json.loads(old), json.loads(text), script.TOLERANCE)
                if found is None and script.TOLERANCE == 0 and old != text:
                    found = "written in another way"
            if found is None:
                state = "same"
            elif given.check:
                state, failed = f"DIFFERS: {found}", True
            else:
                path.write_text(text, encoding="utf-8")
                state = f"written ({found})"
            print(f"{file}: {state}, {time.monotonic() - started:.1f} s", flush=True)
    if not given.scripts:
        for stray in sorted(p.name for p in DATA.iterdir() if p.name not in written):
            print(f"{stray}: no script makes this file")
            failed = True
    sys.exit(1 if failed else 0)


if __name__ == "__main__":
    main()
