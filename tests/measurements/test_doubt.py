"""A reading is asked about only where the other meaning would be at home; nobody is sent to a neighbour in vain."""

import pytest

from measurements.doubt import beside

LASH = {"characteristic": "valve_lash.intake", "lower": "0.25 mm", "upper": "0.35 mm"}


@pytest.mark.parametrize(
    ("one", "other", "near"),
    [
        ("1.intake", "1.exhaust", True), ("1.intake", "2.intake", True), ("1.intake", "2.exhaust", False),
        ("1.intake", "3.intake", False), ("3", "4", True), ("main.1.front", "main.2.front", True),
        ("crankpin.1", "main.1", False), ("1", "crankshaft", False),
    ],
)  # fmt: skip
def test_stations_that_could_be_mistaken_for_each_other(one, other, near):
    assert beside(one, other) is near


def test_nobody_is_sent_to_a_neighbour_of_which_nothing_is_known(judged, finding):
    readings = {"1.intake": "0.01 mm", "1.exhaust": "0.46 mm", "2.intake": "0.32 mm", "2.exhaust": "0.22 mm",
                "3.intake": "0.31 mm", "3.exhaust": "0.85 mm"}  # fmt: skip
    judgement = judged("valve_lash", readings, limits=[LASH])

    slip = finding(judgement, "3.exhaust")["slip"]
    assert slip is None or "belongs" not in slip["if"]


def test_nobody_is_sent_to_a_neighbour_whose_limits_the_reading_does_not_keep(judged):
    exhaust = {"characteristic": "valve_lash.exhaust", "lower": "0.35 mm", "upper": "0.45 mm"}
    limits = {".intake": (0.25, 0.35), ".exhaust": (0.35, 0.45)}
    for hundredths in range(1, 100):
        judgement = judged(
            "valve_lash", {"1.intake": f"0.{hundredths:02} mm", "1.exhaust": "0.40 mm"}, limits=[LASH, exhaust]
        )
        slip = judgement["findings"][0]["slip"]
        if slip and "belongs" in slip["if"]:
            lower, upper = limits[".exhaust"]
            assert lower <= hundredths / 100 <= upper, slip


def test_a_reading_that_fits_the_neighbour_alone_is_asked_about(judged, finding):
    exhaust = {"characteristic": "valve_lash.exhaust", "lower": "0.55 mm", "upper": "0.60 mm"}
    judgement = judged("valve_lash", {"1.intake": "0.57 mm", "1.exhaust": "0.30 mm"}, limits=[LASH, exhaust])

    assert finding(judgement, "1.intake")["slip"]["if"] == "it belongs to 1.exhaust"
