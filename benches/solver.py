"""Hunting beside a general constraint solver on the same targets, one after the other in one run.

    pip install ortools
    cargo build --release
    python3 benches/solver.py [SECONDS]      how long the solver may try each target [480]

The solver (CP-SAT of OR-tools) gets the definition as counting constraints, with one Boolean for each
run, factor and level and one for each pair of factors in a run, and simple symmetry breaking: the
first two columns are written down, the first run is all zeros, and runs that agree in the first two
columns are in the order of the third. `trysquare hunt` is a process of its own each time, starting and
judging included; its time is the median of five seeds.
"""
import itertools
import json
import pathlib
import statistics
import subprocess
import sys
import time

import ortools
from ortools.sat.python import cp_model

PROGRAM = pathlib.Path(__file__).parent.parent / "target" / "release" / "trysquare"
THREADS = 2
TARGETS = [  # runs, levels (most levels first), the mix as text
    (18, [3] * 7, "3^7"),
    (18, [3] * 7 + [2], "2 3^7"),
    (20, [5] + [2] * 8, "2^8 5"),
    (24, [6, 4] + [2] * 11, "2^11 4 6"),
    (36, [3] * 12, "3^12"),
]


def hunt(runs, mix):
    times = []
    for seed in range(1, 6):
        begin = time.perf_counter()
        command = [PROGRAM, "hunt", mix, "--runs", str(runs), "--seed", str(seed)]
        done = subprocess.run(
            command + ["--threads", str(THREADS), "--json", "--quiet"], capture_output=True, check=True
        )
        times.append(time.perf_counter() - begin)
        check(json.loads(done.stdout)["array"], runs)
    return statistics.median(times)


def check(array, runs):
    assert len(array) == runs
    for a, b in itertools.combinations(zip(*array), 2):
        pairs = list(zip(a, b))
        each = {pairs.count(pair) for pair in itertools.product(set(a), set(b))}
        assert each == {runs // len(set(a)) // len(set(b))}


def solve(runs, levels, limit):
    model = cp_model.CpModel()
    cell = [
        [[model.new_bool_var("") for _ in range(s)] for s in levels] for _ in range(runs)
    ]
    for row in cell:
        for booleans in row:
            model.add_exactly_one(booleans)
    for j, s in enumerate(levels):
        for level in range(s):
            model.add(sum(row[j][level] for row in cell) == runs // s)
    for (j, s), (k, t) in itertools.combinations(enumerate(levels), 2):
        for a, b in itertools.product(range(s), range(t)):
            both = []
            for row in cell:
                z = model.new_bool_var("")
                model.add_bool_and([row[j][a], row[k][b]]).only_enforce_if(z)
                model.add_bool_or([row[j][a].negated(), row[k][b].negated(), z])
                both.append(z)
            model.add(sum(both) == runs // (s * t))
    symmetry(model, cell, runs, levels)
    solver = cp_model.CpSolver()
    solver.parameters.max_time_in_seconds = limit
    solver.parameters.num_workers = THREADS
    begin = time.perf_counter()
    status = solver.solve(model)
    seconds = time.perf_counter() - begin
    if status not in (cp_model.OPTIMAL, cp_model.FEASIBLE):
        return None
    check(
        [[next(v for v in range(s) if solver.value(row[j][v])) for j, s in enumerate(levels)] for row in cell],
        runs,
    )
    return seconds


def symmetry(model, cell, runs, levels):
    each = runs // (levels[0] * levels[1])
    for r, row in enumerate(cell):
        first, second = divmod(r // each, levels[1])
        model.add(row[0][first] == 1)
        model.add(row[1][second] == 1)
    for j in range(2, len(levels)):
        model.add(cell[0][j][0] == 1)
    value = [sum(v * b for v, b in enumerate(row[2])) for row in cell]
    for r in range(1, runs):
        if r % each:
            model.add(value[r - 1] <= value[r])


def main():
    limit = float(sys.argv[1]) if len(sys.argv) > 1 else 480.0
    version = subprocess.run([PROGRAM, "--version"], capture_output=True, text=True, check=True).stdout.strip()
    print(f"{version}; CP-SAT of OR-tools {ortools.__version__}; {THREADS} threads each; limit {limit:.0f} s")
    print(f"{'target':16} {'hunt':>10} {'solver':>12} {'ratio':>10}")
    for runs, levels, mix in TARGETS:
        ours = hunt(runs, mix)
        theirs = solve(runs, levels, limit)
        shown = f"{theirs:10.2f} s" if theirs else "nothing"
        ratio = (theirs or limit) / ours
        print(f"{f'{runs}: {mix}':16} {ours * 1000:7.1f} ms {shown:>12} {'' if theirs else '>'}{ratio:9.0f}", flush=True)


main()
