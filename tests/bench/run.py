"""How long the calculations take, as a table: python tests/bench/run.py [words in a name].

Runs every function ``bench_...`` of every file ``bench_*.py`` beside this one. Such a function
takes nothing, returns how many cases it worked out, and its docstring says what it does. The
first call is not counted; of the next ones, for at least half a second, the quickest is shown.
Nothing here passes or fails: times belong to the machine they were taken on.
"""

from __future__ import annotations

import importlib.util
import inspect
import sys
import time
from collections.abc import Callable, Iterator
from pathlib import Path

Bench = Callable[[], int]


def benches(folder: Path) -> Iterator[tuple[str, Bench]]:
    """Every bench in ``folder`` with its name, file by file, in the order written."""
    for file in sorted(folder.glob("bench_*.py")):
        spec = importlib.util.spec_from_file_location(file.stem, file)
        assert spec
        assert spec.loader
        module = importlib.util.module_from_spec(spec)
        spec.loader.exec_module(module)
        for name, bench in vars(module).items():
            if name.startswith("bench_") and inspect.isfunction(bench):
                yield f"{file.stem.removeprefix('bench_')}.{name.removeprefix('bench_')}", bench


def quickest_s(bench: Bench) -> tuple[float, int]:
    """Shortest time [s] of one call, and the cases it worked out."""
    cases = bench()
    best, spent = float("inf"), 0.0
    while spent < 0.5:
        start = time.perf_counter()
        bench()
        took = time.perf_counter() - start
        best, spent = min(best, took), spent + took
    return best, cases


def main(words: list[str]) -> None:
    """Print the table of the benches whose name holds one of ``words``, or of all."""
    print(f"{'':28} {'cases':>9} {'ms':>10} {'µs a case':>10}")
    for name, bench in benches(Path(__file__).parent):
        if words and not any(word in name for word in words):
            continue
        best_s, cases = quickest_s(bench)
        about = (inspect.getdoc(bench) or "").partition("\n")[0]
        each = best_s * 1e6 / cases
        print(f"{name:28} {cases:9d} {best_s * 1e3:10.2f} {each:10.2f}  {about}", flush=True)


if __name__ == "__main__":
    main(sys.argv[1:])
