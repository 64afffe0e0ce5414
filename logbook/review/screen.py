"""A sheet made ready for the screen: the same data that is signed, with its rulers drawn."""

from collections.abc import Mapping

from .words import drawn


def on_screen(sheet: Mapping[str, object]) -> dict[str, object]:
    """Give a job sheet with pictures; the sheet itself, and so its fingerprint, stays as it is."""
    passes = [
        {**one, "rows": [pictured(row) for row in one["rows"]], "derived": [pictured(row) for row in one["derived"]]}
        for one in sheet["passes"]
    ]
    return {**sheet, "passes": passes}


def pictured(row: Mapping[str, object]) -> dict[str, object]:
    """A row with its ruler as a picture."""
    return {**row, "picture": drawn(row.get("ruler"))}
