"""`make bench`: how long our own code takes beside a floor for the same work, as a ratio, both timed in one run.

Each `bench_*.py` beside this file has a function `figures()` that gives rows of
(what, ours [s], floor [s], bound on ours/floor or None).
"""

import importlib.util
import os
import sys
from collections.abc import Iterator
from pathlib import Path

HERE = Path(__file__).resolve().parent
ROOT = HERE.parents[1]
Row = tuple[str, float, float, float | None]


def main() -> int:
    """Print the table; 1 when a ratio is over its bound."""
    sys.path.insert(0, str(ROOT))
    os.chdir(ROOT)
    modules = sorted(HERE.glob("bench_*.py"))
    if not modules:
        print("No benchmark is here: tests/speed holds no bench_*.py.")
        return 1
    print(f"{'what':<58} {'ours':>10} {'floor':>10} {'ratio':>8} {'bound':>7}")
    over = 0
    for row in (row for path in modules for row in rows_of(path)):
        print(line(row), flush=True)
        over += is_over(row)
    print(f"{over} over the bound" if over else "all within their bounds")
    return 1 if over else 0


def rows_of(path: Path) -> Iterator[Row]:
    """Run one module's figures."""
    spec = importlib.util.spec_from_file_location(path.stem, path)
    module = importlib.util.module_from_spec(spec)
    spec.loader.exec_module(module)
    yield from module.figures()


def is_over(row: Row) -> bool:
    """Tell whether a row's ratio is over its bound; without a bound it never is.

    >>> is_over(("assess", 3.2, 2.0, 1.5)), is_over(("assess", 3.0, 2.0, 1.5)), is_over(("told only", 9.0, 1.0, None))
    (True, False, False)
    """
    _, ours, floor, bound = row
    return bound is not None and ours > bound * floor


def line(row: Row) -> str:
    """Write a row of the table.

    >>> line(("crank plan of a vee 20", 0.0031, 0.005, 1.0))[58:]
    '     3.1 ms     5.0 ms     0.62    1.00'
    """
    what, ours, floor, bound = row
    mark = "  over" if is_over(row) else ""
    told = "" if bound is None else f"{bound:.2f}"
    return f"{what:<58} {ours * 1000:>7.1f} ms {floor * 1000:>7.1f} ms {ours / floor:>8.2f} {told:>7}{mark}"


if __name__ == "__main__":
    sys.exit(main())
