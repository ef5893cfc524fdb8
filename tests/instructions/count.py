"""Counts the instructions of the engine's kernels under callgrind; fails when a case needs too many.

Unlike a time the count does not depend on what else the machine does.  The engine's benchmark runs
a case so many times (`--count CASE TIMES`, with no wider vectors than AVX2, for valgrind knows no
AVX-512); the difference of two such runs leaves out the start, the preparation and the comparison
with the natural formulas.  An evaluation is one film at one wavelength for one polarisation.

Ends with status 0 when all limits hold, with 1 when one does not or nothing could be counted, and
says that it was skipped, and why, where the processor has no AVX2 or there is no valgrind.
"""

import json
import re
import shutil
import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent.parent

# Instructions for one evaluation, at most.
LIMITS = {"a": 9.0, "b": 20.0, "d": 20.0}
# How often a case is run in the shorter and in the longer of the two runs.
FEW, MANY = 1, 11


def why_not():
    """Why nothing can be counted here, or None."""
    if shutil.which("valgrind") is None:
        return "valgrind is not installed"
    try:
        flags = set(re.findall(r"\w+", Path("/proc/cpuinfo").read_text(encoding="utf-8")))
    except OSError:
        return "no /proc/cpuinfo tells whether the processor has AVX2"
    missing = {"avx2", "fma"} - flags
    return f"the processor has no {' and no '.join(sorted(missing))}" if missing else None


def benchmark():
    """Builds the benchmark and returns its path."""
    command = ["cargo", "bench", "--locked", "-p", "overcoat-engine", "--bench", "engine", "--no-run"]
    command.append("--message-format=json-render-diagnostics")
    built = subprocess.run(command, cwd=ROOT, stdout=subprocess.PIPE, text=True, check=True)
    for message in map(json.loads, built.stdout.splitlines()):
        if message.get("executable") and message["target"]["kind"] == ["bench"]:
            return message["executable"]
    sys.exit("cargo built no benchmark")


def instructions(program, case, times):
    """Instructions of one whole run, and evaluations of the case each time."""
    command = ["valgrind", "--tool=callgrind", "--callgrind-out-file=/dev/null"]
    command += [program, "--count", case, str(times)]
    run = subprocess.run(command, capture_output=True, text=True)
    collected = re.search(r"Collected : (\d+)", run.stderr)
    if run.returncode != 0 or collected is None:
        sys.exit(f"case {case} can't be counted:\n{run.stderr}")
    return int(collected[1]), float(run.stdout)


def main():
    skipped = why_not()
    if skipped:
        print(f"SKIPPED, nothing was counted: {skipped}")
        return
    program = benchmark()
    failed = False
    for case, limit in LIMITS.items():
        fewer, evaluations = instructions(program, case, FEW)
        more, _ = instructions(program, case, MANY)
        each = (more - fewer) / (MANY - FEW) / evaluations
        if each <= 0:
            sys.exit(f"case {case}: the longer run has no more instructions; nothing was counted")
        kept = each <= limit
        failed |= not kept
        state = "ok" if kept else "TOO MANY"
        print(f"case {case}: {each:.2f} instructions an evaluation, at most {limit:g}: {state}", flush=True)
    sys.exit(1 if failed else 0)


if __name__ == "__main__":
    main()
