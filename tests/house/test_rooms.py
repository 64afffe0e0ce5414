"""DEVELOPERS.md's room plan, as tests."""

import ast
import re
import subprocess
import sys
import tomllib
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
TOP = {
    "manage.py", "pyproject.toml", "README.md", "DEVELOPERS.md", "logbook", "measurements", "templates", "tests",
    "fixtures", "Makefile", "requirements.lock", ".gitignore", ".ci",
}  # fmt: skip


def is_ours(path: Path) -> bool:
    """Tell whether we wrote it: not vendored, and not left behind by a tool."""
    parts = path.relative_to(ROOT).parts
    return not any(part in {"vendor", "__pycache__"} or (part.startswith(".") and part != ".ci") for part in parts)


OURS = sorted(
    path
    for top in ("logbook", "measurements", "templates", "tests", ".ci")
    for path in (ROOT / top).rglob("*")
    if path.is_file() and is_ours(path)
)
PYTHON = [path for path in OURS if path.suffix == ".py"]
LONGEST = 400  # lines; 60 to 130 is usual, past 300 look for the second thing it does
KINDS_MAY_USE = {
    "kind", "units", "engine", "air", "thermal",  # what they measure with
    "sentence", "check_value", "stations", "reference", "geometry", "evenness",  # words, numbers and places; none of them judges
}  # fmt: skip
MEASURING_STANDS_ON = {"numpy", "scipy", "pint", "measurements"} | sys.stdlib_module_names


def short(path: Path) -> str:
    return str(path.relative_to(ROOT))


def imported_by(path: Path) -> set[str]:
    """Every module name that a file imports; `from measurements import engine` counts as measurements.engine."""
    names: set[str] = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            names |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0 or "measurements" not in path.parts, f"{short(path)} imports by dots"
            module = node.module or ""
            names |= {f"measurements.{alias.name}" for alias in node.names} if module == "measurements" else {module}
    return names


def test_the_top_level_holds_nothing_else():
    if not (ROOT / ".git").exists():
        pytest.skip("not a clone: git can't tell which files are the project's")
    listed = subprocess.run(
        ["git", "-c", f"safe.directory={ROOT}", "ls-files", "--cached", "--others", "--exclude-standard"],
        cwd=ROOT, capture_output=True, text=True, check=True,
    ).stdout  # fmt: skip
    assert {Path(line).parts[0] for line in listed.splitlines()} <= TOP


def test_every_room_is_named_in_the_contract_about_its_inside():
    contracts = tomllib.loads((ROOT / "pyproject.toml").read_text())["tool"]["importlinter"]["contracts"]
    inside = next(contract for contract in contracts if contract["name"].startswith("Inside a room"))
    rooms = {f"logbook.{path.parent.name}" for path in (ROOT / "logbook").glob("*/__init__.py")}
    assert set(inside["containers"]) == rooms


@pytest.mark.parametrize("path", [path for path in PYTHON if path.parent.name != "migrations"], ids=short)
def test_a_file_is_a_room_with_one_purpose(path):
    assert len(path.read_text(encoding="utf-8").splitlines()) <= LONGEST


@pytest.mark.parametrize("path", OURS, ids=short)
def test_nothing_is_left_for_later(path):
    if path == Path(__file__) or path.suffix in {".woff2", ".png", ".pdf"}:
        return
    assert re.findall(r"\b(?:TODO|FIXME|XXX|HACK)\b", path.read_text(encoding="utf-8")) == []


def test_tests_are_no_packages():
    assert [short(path) for path in (ROOT / "tests").rglob("__init__.py")] == []


def test_no_folder_is_empty():
    folders = [path for top in ("logbook", "measurements", "templates", "tests") for path in (ROOT / top).rglob("*/")]
    assert [short(folder) for folder in folders if is_ours(folder) and not any(folder.iterdir())] == []


def test_the_measuring_library_stands_on_numpy_scipy_pint_and_the_standard_library_alone():
    strangers = {
        (short(path), name)
        for path in PYTHON
        if path.is_relative_to(ROOT / "measurements")
        for name in imported_by(path)
        if name.split(".")[0] not in MEASURING_STANDS_ON
    }
    assert strangers == set()


def test_the_measuring_library_is_usable_without_django():
    walk = (
        "import sys, pkgutil, importlib, measurements\n"
        "for found in pkgutil.walk_packages(measurements.__path__, 'measurements.'):\n"
        "    importlib.import_module(found.name)\n"
        "print(sorted(name for name in sys.modules if name.split('.')[0] in ('django', 'logbook')))"
    )
    done = subprocess.run([sys.executable, "-c", walk], cwd=ROOT, capture_output=True, text=True)
    assert (done.stdout, done.stderr) == ("[]\n", "")


def test_pint_is_met_in_one_place():
    meets = {
        short(path)
        for path in PYTHON
        if not path.is_relative_to(ROOT / "tests") and any(name.split(".")[0] == "pint" for name in imported_by(path))
    }
    assert meets <= {"measurements/units.py"}


def test_kinds_say_what_they_are_and_leave_judging_to_others():
    judging = {
        (short(path), name)
        for path in PYTHON
        if path.parent == ROOT / "measurements" / "kinds" and path.name != "__init__.py"
        for name in imported_by(path)
        if name.startswith("measurements.") and name.split(".")[1] not in KINDS_MAY_USE
    }
    assert judging == set()
