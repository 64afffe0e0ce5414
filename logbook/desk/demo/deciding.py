"""Decides and signs the jobs of the demo as its files say; what was put right needs no word of theirs."""

from datetime import datetime, timedelta

from logbook.people.models import Person
from logbook.review.models import Decision, Signature
from logbook.review.queries import cases_of, witnessed_stations
from logbook.review.services import decide, running_undecided
from logbook.work.models import WorkOrder

from .bench import Visit
from .days import Days
from .history import keep_name
from .story import StoryBroken

Choice, Role = Decision.Choice, Signature.Role
A_LITTLE = timedelta(minutes=4)


def end_job(visit: Visit, order: WorkOrder, by: Person, at: datetime, days: Days) -> None:
    """Have a job signed by who measured and who witnessed, decided, and signed again."""
    at_bench = visit.clock + A_LITTLE
    for person in dict.fromkeys((visit.keys, visit.measures)):
        keep_name(order, Role.MEASURED, person, at_bench)
    if stations := witnessed_stations(order):
        keep_name(order, Role.WITNESSED, visit.bench.people["Witness A"], at_bench + A_LITTLE, stations)
    decide_all(visit, order, by, at, days)
    keep_name(order, Role.DECIDED, by, at + A_LITTLE)


def decide_all(visit: Visit, order: WorkOrder, by: Person, at: datetime, days: Days) -> None:
    """Decide on everything beyond or too close: put right where it was, else as the file says.

    Raises
    ------
    StoryBroken
        Something is undecided and the file says nothing about it.
    """
    for case in cases_of([order], at):
        if not case.is_undecided:
            continue
        if case.is_left_within:
            told = {"choice": Choice.PUT_RIGHT}
        elif "decides" in visit.told:
            told = decision_told(visit.told["decides"], days)
        else:
            named = f"{case.characteristic} {case.station or ''}".strip()
            raise StoryBroken(
                f"{order}, {visit.bench.engine}: {named} is {case.subject.verdict} and nobody decides on it."
            )
        decide(case.subject.decided_on, by=by, at=at, **told)


def decision_told(told: dict, days: Days) -> dict:
    """A decision of a file as `decide` takes it: its end counted from the day the demo is loaded."""
    plain = {name: value for name, value in told.items() if name not in ("by", "ends_in")}
    return plain | ({"ends_on": days.day(-told["ends_in"])} if "ends_in" in told else {})


def put_back(visit: Visit, order: WorkOrder) -> None:
    """Put an engine back before a decision, where the file says on whose word."""
    told = visit.told["running_undecided"]
    running_undecided(order, by=visit.bench.people[told["by"]], at=visit.clock + A_LITTLE,
                      on_whose_word=told["on_whose_word"])  # fmt: skip
