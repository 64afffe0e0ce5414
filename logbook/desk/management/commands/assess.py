"""`manage.py assess FILE`: the whole judgement without the web, a database or a network; JSON in, JSON out."""

import json
import sys
from pathlib import Path

from django.core.management import BaseCommand, CommandParser

from measurements.assess import assess_bytes
from measurements.document import MOST_BYTES, Unjudgeable
from measurements.sentence import say

NOT_JUDGED = 2


class Command(BaseCommand):
    help = "Judges one JSON document and writes the judgement; exit status 2 when it can't be judged."
    requires_system_checks = ()

    def add_arguments(self, parser: CommandParser) -> None:
        parser.add_argument("file", nargs="?", help="the document, or - for standard input")
        parser.add_argument("--schema", choices=("in", "out"), help="write the JSON Schema of one direction instead")

    def handle(self, *, file: str | None, schema: str | None, **_: object) -> None:
        if schema:
            from measurements.schema import schema_in, schema_out

            write(schema_in() if schema == "in" else schema_out())
            return
        try:
            write(assess_bytes(document(file)))
        except Unjudgeable as refused:
            write({"errors": [{"path": path, "message": str(sentence)} for path, sentence in refused.errors]})
            sys.exit(NOT_JUDGED)


def document(file: str | None) -> bytes:
    """Read the document, one byte past its bound at most.

    Raises
    ------
    Unjudgeable
        When there is no file, or it can't be read.
    """
    if file is None:
        raise Unjudgeable([("", say("No document is named: give a file, or - for standard input."))])
    if file == "-":
        return sys.stdin.buffer.read(MOST_BYTES + 1)
    try:
        with Path(file).open("rb") as opened:
            return opened.read(MOST_BYTES + 1)
    except (OSError, ValueError) as error:
        told = say(
            "The file {file} can't be read: {why}.", file=file, why=getattr(error, "strerror", None) or str(error)
        )
        raise Unjudgeable([("", told)]) from error


def write(told: object) -> None:
    """Write one JSON value and a line end; a lone surrogate goes out as the escape it came in as."""
    text = json.dumps(told, ensure_ascii=False, allow_nan=False, indent=2)
    sys.stdout.buffer.write(text.encode("utf-8", "backslashreplace") + b"\n")
    sys.stdout.flush()
