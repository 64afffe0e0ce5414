"""A sheet made ready for its template: rulers and marks drawn, sources of limits numbered once for the whole sheet."""

from collections.abc import Mapping

from .pictures import is_under, mark_on_paper, ruler_on_paper

Row = Mapping[str, object]


def as_printed(sheet: Mapping[str, object]) -> dict[str, object]:
    """Give a sheet as its template prints it; the sheet itself stays as it is."""
    sources: list[str] = []
    passes = [
        {
            **one,
            "rows": [row_as_printed(row, sources) for row in one.get("rows", ())],
            "derived": [row_as_printed(row, sources) for row in one.get("derived", ())],
        }
        for one in sheet.get("passes", ())
    ]
    return {**sheet, "passes": passes, "sources": sources}


def row_as_printed(row: Row, sources: list[str]) -> dict[str, object]:
    """A row with its pictures and the number of its source, which joins the sources when it is new."""
    source = row.get("source")
    if source and source not in sources:
        sources.append(source)
    return {
        **row,
        "picture": ruler_on_paper(row.get("ruler")),
        "mark": mark_on_paper(row.get("verdict", ""), row.get("words", ""), is_under=is_under(row.get("ruler"))),
        "source_number": sources.index(source) + 1 if source else None,
    }
