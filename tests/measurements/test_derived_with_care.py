"""What can't honestly be derived is left out and said: mixed states, bounds, other barometers, places not read."""

import pytest

from measurements.assess import assess


def visits(engine: dict, *measurements: dict) -> dict:
    return assess({"engine": engine, "measurements": [{"phase": "as_found", **one} for one in measurements]})


def test_a_lash_left_cold_and_found_hot_has_not_changed_by_that(engine):
    left = {
        "kind": "valve_lash",
        "phase": "as_left",
        "hours": 90,
        "conditions": {"state": "cold"},
        "readings": {"1.intake": "0.30"},
    }
    found = {"kind": "valve_lash", "hours": 190, "conditions": {"state": "hot"}, "readings": {"1.intake": "0.25"}}

    judgement = visits(engine, left, found)

    assert judgement["derived"] == []
    assert "Change of lash at 1.intake is left out: it was cold before and is hot now." in judgement["warnings"]


def test_a_change_of_lash_stands_in_the_unit_of_its_own_reading(engine, derived):
    left = {
        "kind": "valve_lash",
        "phase": "as_left",
        "hours": 90,
        "readings": {"1.intake": "0.30 mm", "1.exhaust": "0.40 mm"},
    }
    found = {"kind": "valve_lash", "hours": 190, "readings": {"1.intake": "0.012 in", "1.exhaust": "0.41 mm"}}

    change = derived(visits(engine, left, found), "valve_lash.change", "1.exhaust")

    assert (change["value"], change["unit"]) == (0.01, "mm")


def test_a_wet_pass_without_the_barometer_of_the_dry_one_is_compared_as_taken(engine, derived):
    dry = {"kind": "compression", "hours": 5, "conditions": {"barometer": "900 hPa"}, "readings": {"1": "10.0 bar"}}
    wet = {"kind": "compression", "hours": 5, "conditions": {"wet": True}, "readings": {"1": "12.0 bar"}}

    gain = derived(visits(engine, dry, wet), "compression.wet_gain", "1")

    assert gain["value"] == pytest.approx(20.0)
    assert "The barometer is known for only one of the two passes: compared as taken." in gain["notes"]


def test_a_wet_gain_over_the_dry_reading_of_another_visit_says_so(engine, derived):
    dry = {"kind": "compression", "taken_on": "2025-05-02", "readings": {"1": "10.0 bar"}}
    wet = {"kind": "compression", "taken_on": "2026-05-02", "conditions": {"wet": True}, "readings": {"1": "12.0 bar"}}

    gain = derived(visits(engine, dry, wet), "compression.wet_gain", "1")

    assert "The dry reading is of another visit, 2025-05-02." in gain["notes"]


def test_a_wet_reading_is_not_told_about_a_limit_it_has_not(judged, finding):
    limit = [{"characteristic": "compression.pressure", "lower": "10 bar", "condition": "hot"}]
    found = finding(judged("compression", {"1": "12 bar"}, limits=limit, conditions={"wet": True}), "1")

    assert not any("limit holds" in note for note in found["notes"])


def test_evenness_is_left_out_where_a_cylinder_is_only_known_by_a_bound(judged):
    limit = [{"characteristic": "compression.spread", "upper": "25 %"}]
    judgement = judged("compression", {"1": "12 bar", "2": "12 bar", "3": "<2 bar"}, limits=limit)

    assert judgement["derived"] == []
    assert any(
        warning.startswith("Evenness is left out: of cylinder 3 (below 2 bar)") for warning in judgement["warnings"]
    )


@pytest.mark.parametrize("characteristic", ["compression.spread", "compression.difference", "compression.lowest_share"])
def test_each_figure_of_evenness_names_the_cylinders_it_lacks(characteristic, judged, derived):
    judgement = judged("compression", {"1": "12 bar", "2": "11 bar"})

    assert "No figure to compare from cylinder 3, 4." in derived(judgement, characteristic)["notes"]


def test_the_ceiling_of_compression_stands_in_the_unit_of_the_readings(judged, derived):
    judgement = judged(
        "compression", {"1": "150 psi"}, engine={"compression_ratio": 9}, conditions={"barometer": "1013.25 hPa"}
    )

    ceiling = derived(judgement, "compression.expected")
    assert (ceiling["unit"], ceiling["value"]) == ("psi", pytest.approx(14.696 * (9**1.4 - 1), rel=1e-4))


BORED = {"original_diameter": "100 mm", "oversizes": ["0.25 mm", "0.50 mm"], "cleanup_allowance": "0.10 mm",
         "bored_on": "worn_hole"}  # fmt: skip


def test_an_engine_gets_no_oversize_while_one_of_its_cylinders_has_none(judged):
    readings = {"1.top.thrust": "100.1", "2.top.thrust": "100.3", "3.top.thrust": "100.9"}
    judgement = judged("bore", readings, conditions=BORED)

    sized = [one["station"] for one in judgement["derived"] if one["characteristic"] == "bore.oversize"]
    assert sized == ["1", "2"]


@pytest.mark.parametrize("characteristic", ["bore.wear", "bore.oversize"])
def test_wear_and_oversize_of_a_bore_read_in_part_say_what_is_missing(characteristic, judged, derived):
    judgement = judged("bore", {"1.top.thrust": "100.1", "1.top.axial": ">100.2"}, conditions=BORED)

    [note] = [note for note in derived(judgement, characteristic, "1")["notes"] if note.startswith("Without a figure")]
    assert note.startswith("Without a figure: top axial, middle thrust,")


def test_oversizes_without_what_they_are_counted_from_are_said_to_be_left_out(judged):
    judgement = judged("bore", {"1.top.thrust": "100.1"}, conditions={"oversizes": ["0.25 mm"]})

    assert "Oversizes are left out: original diameter and cleanup allowance not given." in judgement["warnings"]


def test_a_piston_without_a_thrust_diameter_of_its_bore_is_said_to_be_left_out(judged):
    judgement = judged("bore", {"1.top.axial": "100.1"}, conditions={"piston_diameters": {"1": "99.9 mm"}})

    assert "Piston clearance of cylinder 1 is left out: no thrust diameter was read." in judgement["warnings"]


def test_where_the_air_of_a_loss_in_percent_came_out_is_kept(judged, finding):
    found = finding(judged("leak_down", {"2": "40 %"}, conditions={"escapes": {"2": ["exhaust"]}}), "2")

    assert "The air came out at: exhaust." in found["notes"]
