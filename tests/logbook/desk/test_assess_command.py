"""`manage.py assess`: JSON in, JSON out, exit 0 when judged and 2 when not, nothing else on standard output."""

import json
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).parents[3]
EXAMPLE = ROOT / "fixtures" / "demo" / "example.json"


def run(*arguments: str, given: bytes = b"") -> subprocess.CompletedProcess:
    return subprocess.run(
        [sys.executable, "manage.py", "assess", *arguments], cwd=ROOT, input=given, capture_output=True, timeout=60
    )


def test_a_file_is_judged():
    done = run(str(EXAMPLE))

    assert (done.returncode, done.stderr) == (0, b"")
    assert [one["verdict"] for one in json.loads(done.stdout)["findings"]] == ["beyond", "no_limit"]


def test_standard_input_is_judged_the_same():
    assert run("-", given=EXAMPLE.read_bytes()).stdout == run(str(EXAMPLE)).stdout


@pytest.mark.parametrize(
    ("arguments", "given", "path", "words"),
    [
        (("-",), b"{", "", "not JSON"),
        (("-",), b'{"engine": {"layout": "inline"}, "measurements": []}', "engine.cylinders", "missing"),
        (("nowhere.json",), b"", "", "No such file"),
        ((".",), b"", "", "directory"),
        ((), b"", "", "No document is named"),
    ],
)
def test_what_cannot_be_judged_gives_errors_and_status_2(arguments, given, path, words):
    done = run(*arguments, given=given)

    assert done.returncode == 2
    [error] = json.loads(done.stdout)["errors"]
    assert error["path"] == path
    assert words in error["message"]
    assert b"Traceback" not in done.stderr


def test_a_lone_surrogate_comes_back_as_the_escape_it_was():
    document = b'{"engine": {"layout": "inline", "cylinders": 1}, "measurements": [{"kind": "\\ud800"}]}'
    done = run("-", given=document)

    assert done.returncode == 2
    assert b'"\\ud800"' in done.stdout.replace(b'\\"', b'"')
    assert json.loads(done.stdout)["errors"][0]["path"] == "measurements[0].kind"


@pytest.mark.parametrize("direction", ["in", "out"])
def test_the_schema_of_each_direction_is_written(direction):
    assert json.loads(run("--schema", direction).stdout)["$schema"].endswith("2020-12/schema")


def test_judging_loads_no_statistics_library_and_opens_no_database():
    code = (
        "import sys, io; sys.argv = ['manage.py', 'assess', sys.argv[1]]; sys.path.insert(0, '.');"
        "import os; os.environ['DJANGO_SETTINGS_MODULE'] = 'logbook.settings';"
        "from django.core.management import execute_from_command_line as go; go(sys.argv);"
        "from django.db import connection;"
        "print([name for name in sys.modules if name.startswith(('scipy.stats', 'scipy.special', 'scipy.optimize'))],"
        "connection.connection, file=sys.stderr)"
    )
    done = subprocess.run([sys.executable, "-c", code, str(EXAMPLE)], cwd=ROOT, capture_output=True, timeout=60)

    assert done.stderr.decode().strip() == "[] None"  # pint itself touches the bare name scipy, none of its parts
