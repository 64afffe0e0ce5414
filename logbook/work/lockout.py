"""Lockout: what each state of the engine asks to have locked, free and checked, and how one goes over into the next.

Source: 29 CFR 1910.147(d): prepare, shut down, isolate, lock or tag, relieve stored energy, verify. Which points an engine
has is common practice of the trade; local codes and the maker's manual come first.
"""

from collections.abc import Iterable
from dataclasses import dataclass

from django.utils.translation import gettext_lazy as _

from measurements.kind import AT_REST, CRANKED, TURNED_BY_HAND, UNDER_AIR, Caution

STARTER = "starting battery or starting air"
FUEL = "fuel"
IGNITION = "ignition or stop lever"
DRIVEN = "driven machine"
CRANK_HOLD = "crank hold"

HOW = {
    STARTER: _("Isolate the starting battery or shut the starting air and empty its line; then try the starter: nothing moves."),
    FUEL: _("Shut the fuel off and vent it; see that the gauge or the line shows no pressure."),
    IGNITION: _("Switch the ignition off and take its key, or fix the stop lever at stop; see that it can't spring back."),
    DRIVEN: _("Uncouple or block what the engine drives, so that nothing can turn the crank from that side."),
    CRANK_HOLD: _("Hold the crank mechanically; lean on it both ways: it doesn't move."),
}  # fmt: skip


@dataclass(frozen=True)
class AskedFor:
    """What a state of the engine asks: points locked, points free of any lock, and what is looked at besides."""

    title: str
    locked: tuple[str, ...]
    free: tuple[str, ...]
    checks: tuple[str, ...]
    cautions: tuple[Caution, ...]


STATES: dict[str, AskedFor] = {
    AT_REST: AskedFor(
        _("at rest: isolated, and nobody turns it"),
        (STARTER, FUEL, IGNITION, DRIVEN),
        (),
        (_("The engine has cooled down enough to be touched."),),
        (Caution("WARNING", _("Fuel, starter and ignition locked out: an engine that starts by itself crushes hands.")),),
    ),
    TURNED_BY_HAND: AskedFor(
        _("turned by hand: isolated"),
        (STARTER, FUEL, IGNITION, DRIVEN),
        (CRANK_HOLD,),
        (
            _("Cylinders are open to the air or their cocks are open: nothing is compressed."),
            _("Before every turn of the crank: feeler out, hands clear, helper answers."),
        ),
        (Caution("DANGER", _("Fuel and ignition off before barring: a hot engine can fire when it is turned.")),),
    ),
    CRANKED: AskedFor(
        _("cranked by its starter: ignition and fuel off, all clear"),
        (FUEL, IGNITION),
        (STARTER, CRANK_HOLD),
        (
            _("The barring bar is out."),
            _("What the engine drives is uncoupled, or nobody can come near it when it turns."),
            _("Everybody is clear, called and answered, before each cranking."),
        ),
        (Caution("DANGER", _("The starter turns the engine: bar out, everybody clear, called and answered.")),),
    ),
    UNDER_AIR: AskedFor(
        _("under air: crank mechanically held, bar out"),
        (STARTER, FUEL, IGNITION, DRIVEN, CRANK_HOLD),
        (),
        (_("The barring bar is out."), _("The air is let in slowly.")),
        (Caution("DANGER", _("The engine can turn under air: crank held, bar out, hands clear before air goes on.")),),
    ),
}  # fmt: skip


@dataclass(frozen=True)
class Change:
    """What a person does with their locks so that the engine may go over into a state, by the points' names."""

    lift: tuple[str, ...]
    take: tuple[str, ...]
    keep: tuple[str, ...]


def change_to(state: str, points_on: Iterable[str]) -> Change:
    """Say which locks are lifted, taken and kept to reach a state from the locks a person has on.

    A lock on a point of their own naming stays as it is.

    >>> change_to("cranked", ["starting battery or starting air", "fuel"])
    Change(lift=('starting battery or starting air',), take=('ignition or stop lever',), keep=('fuel',))
    """
    asked, on = STATES[state], tuple(dict.fromkeys(points_on))
    return Change(
        lift=tuple(point for point in on if point in asked.free),
        take=tuple(point for point in asked.locked if point not in on),
        keep=tuple(point for point in on if point not in asked.free),
    )
