"""Reads the invented shop's files and says what in them doesn't hold together."""

import json
from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path

from django.conf import settings

FOLDER = Path(settings.BASE) / "fixtures" / "demo" / "shop"
ENDS = ("planned", "at_the_bench", "stopped_short", "to_decide", "signed")


class StoryBroken(Exception):
    """The files of the demo contradict one another; the text says where."""


@dataclass(frozen=True)
class Story:
    """The invented shop as its files tell it: plain data, days counted back from the day it is loaded."""

    shop: dict
    password: str
    people: list[dict]
    gauges: list[dict]
    parts: list[dict]
    part_jobs: list[dict]
    engines: list[dict] = field(default_factory=list)


def read_story(folder: Path = FOLDER) -> Story:
    """Read the files of a folder.

    Raises
    ------
    StoryBroken
        A file can't be read, or names somebody or something that isn't there.
    """
    shop, parts = _read(folder / "shop.json"), _read(folder / "parts.json")
    story = Story(
        shop=shop["shop"], password=shop["password"], people=shop["people"],
        gauges=_read(folder / "gauges.json")["gauges"], parts=parts["parts"], part_jobs=parts["jobs"],
        engines=[_read(path) for path in sorted(folder.glob("engine-*.json"))],
    )  # fmt: skip
    if wrong := list(contradictions(story)):
        raise StoryBroken(" ".join(wrong))
    return story


def contradictions(story: Story) -> Iterator[str]:
    """Say what is named without being there, and what ends in a way that no job can."""
    people = {person["name"] for person in story.people}
    gauges = {gauge["mark"] for gauge in story.gauges}
    for engine in story.engines:
        name, kept = engine["engine"]["name"], {interval["title"] for interval in engine["intervals"]}
        for visit in engine["visits"]:
            told = f"{name}, “{visit['title']}”"
            named = {
                *visit.get("hands", ()),
                *(visit[key]["by"] for key in ("decides", "running_undecided") if key in visit),
            }
            used = {*engine["gauges"].values(), *visit.get("gauge", {}).values()}
            yield from (f"{told} names {who}, who isn't in the shop." for who in sorted(named - people))
            yield from (f"{told} uses gauge {mark}, which isn't there." for mark in sorted(used - gauges))
            yield from (
                f"{told} does “{title}”, which isn't kept." for title in sorted({*visit.get("does", ())} - kept)
            )
            if visit.get("ends", "signed") not in ENDS:
                yield f"{told} ends “{visit['ends']}”; it can be {', '.join(ENDS)}."


def _read(path: Path) -> dict:
    try:
        return json.loads(path.read_text(encoding="utf-8"))
    except (OSError, ValueError) as error:
        raise StoryBroken(f"The demo's file {path.name} can't be read: {error}.") from error
