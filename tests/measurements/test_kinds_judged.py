"""Each kind derives what its description says, with the uncertainty that follows and its warnings."""

from math import sqrt

import pytest

from measurements.assess import assess

# --- valve lash


def test_the_change_of_lash_counts_from_the_last_as_left_whatever_the_order_written(lash_visits, derived):
    change = derived(assess(lash_visits), "valve_lash.change", "1.intake")

    assert (change["value"], change["measurement"]) == (-0.07, 0)
    assert change["rate_per_1000_h"] == pytest.approx(-0.07 / 412 * 1000)


def test_one_gauges_calibration_cancels_in_a_change_of_lash(lash_visits, derived):
    change = derived(assess(lash_visits), "valve_lash.change", "1.intake")

    assert change["standard_uncertainty"] == pytest.approx(sqrt(2) * 0.01 / sqrt(12))


def test_two_gauges_calibrations_do_not_cancel(lash_visits, derived):
    document = lash_visits
    document["gauges"].append({**document["gauges"][0], "id": "H"})
    document["measurements"][1]["gauge"] = "H"

    change = derived(assess(document), "valve_lash.change", "1.intake")

    assert change["standard_uncertainty"] == pytest.approx(sqrt(2 * 0.01**2 / 12 + 2 * 0.004**2))


# --- compression


def test_compression_is_brought_to_the_reference_barometer(judged, finding):
    judgement = judged("compression", {"1": "99.85 psi"}, conditions={"barometer": "843.07 hPa"})

    assert finding(judgement, "1")["value"] == pytest.approx(120, abs=0.01)  # ISO 2533: 843.07 hPa at 1524 m


def test_an_absolute_reading_is_brought_to_gauge_pressure_first(judged, finding):
    judgement = judged("compression", {"1": "13.0 bar abs"}, conditions={"barometer": "1000 hPa"})

    assert finding(judgement, "1")["value"] == pytest.approx(12.0 * 1.01325)


def test_an_absolute_reading_without_barometer_is_left_out_and_said(judged):
    judgement = judged("compression", {"1": "13.0 bar abs"})

    assert judgement["findings"] == []
    assert "Measurement 0, 1: An absolute pressure can't be judged without the barometer." in judgement["warnings"]


@pytest.mark.parametrize(
    ("characteristic", "value"),
    [
        ("compression.spread", 100 * 40 / 445),
        ("compression.difference", 40.0),
        ("compression.lowest_share", 100 * 405 / 445),
    ],
)
def test_evenness_of_a_pass(characteristic, value, judged, derived):
    judgement = judged("compression", {"1": "445 psi", "2": "440 psi", "3": "405 psi", "4": "435 psi"})

    assert derived(judgement, characteristic)["value"] == pytest.approx(value)


def test_the_limit_that_spoke_names_the_cylinder(judged, derived):
    limit = [{"characteristic": "compression.difference", "upper": "25 psi"},
             {"characteristic": "compression.lowest_share", "lower": "75 %"}]  # fmt: skip
    judgement = judged("compression", {"1": "445 psi", "2": "440 psi", "3": "405 psi", "4": "435 psi"}, limits=limit)

    assert derived(judgement, "compression.difference")["verdict"] == "beyond"
    assert "This limit singles out 3: over 25 psi." in derived(judgement, "compression.difference")["notes"]
    assert derived(judgement, "compression.lowest_share")["verdict"] == "within"


def test_evenness_is_right_when_cylinders_were_typed_in_different_units(judged, derived):
    judgement = judged("compression", {"1": "10 bar", "2": "130.534 psi"})  # 130.534 psi = 9 bar

    assert derived(judgement, "compression.difference")["value"] == pytest.approx(1.0, abs=1e-4)
    assert derived(judgement, "compression.spread")["value"] == pytest.approx(10.0, abs=1e-3)


def test_a_wet_pass_gains_on_the_dry_one_and_has_no_limit(derived, engine):
    document = {"engine": engine, "limits": [{"characteristic": "compression.pressure", "lower": "10 bar"}], "measurements": [
        {"kind": "compression", "hours": 10, "conditions": {"wet": True}, "readings": {"2": "11.375 bar"}},
        {"kind": "compression", "hours": 10, "readings": {"2": "9.1 bar"}}]}  # fmt: skip
    judgement = assess(document)

    assert derived(judgement, "compression.wet_gain", "2")["value"] == pytest.approx(25.0)
    assert judgement["findings"][0]["verdict"] == "no_limit"


def test_slow_cranking_makes_a_compression_ignition_reading_doubtful(judged, finding):
    judgement = judged(
        "compression", {"1": "28 bar"}, engine={"ignition": "compression"}, conditions={"cranking_speed": "120 rpm"}
    )

    told = "Cranked at 120 rpm: under about 140 rpm a compression-ignition reading is doubtful."
    assert told in finding(judgement, "1")["notes"]


# --- leak-down


TESTER = {
    "id": "LT",
    "quantity": "pressure",
    "resolution": "1 psi",
    "expanded_uncertainty": "1 psi",
    "coverage_factor": 2,
}


def test_a_loss_in_percent_goes_through_the_pressure_gauge(judged, finding):
    judgement = judged(
        "leak_down", {"1": "25 %"}, gauges=[TESTER], gauge="LT", conditions={"supply_pressure": "80 psi"}
    )

    found = finding(judgement, "1")
    assert (found["characteristic"], found["value"], found["unit"]) == ("leak_down.loss", 25.0, "%")
    # u(loss) = u(gauge) / supply = 0.5/80 = 0.625 %, with the typed step of 1 %
    assert found["standard_uncertainty"] == pytest.approx(sqrt(0.625**2 + 1 / 12))


def test_a_pressure_gives_the_loss_and_the_hole_in_the_unit_of_the_orifice(judged, derived):
    conditions = {"supply_pressure": "80 psi", "orifice_diameter": "0.040 in", "barometer": "1013.25 hPa"}
    judgement = judged("leak_down", {"2": "60 psi"}, gauges=[TESTER], gauge="LT", conditions=conditions)

    assert derived(judgement, "leak_down.loss", "2")["value"] == 25.0
    hole = derived(judgement, "leak_down.equivalent_orifice", "2")
    assert (round(hole["value"], 4), hole["unit"]) == (0.0412, "in")


def test_a_loss_in_percent_gives_the_same_hole(judged, derived):
    conditions = {"supply_pressure": "80 psi", "orifice_diameter": "0.040 in", "barometer": "1013.25 hPa"}
    judgement = judged("leak_down", {"2": "25.0 %"}, conditions=conditions)

    assert round(derived(judgement, "leak_down.equivalent_orifice", "2")["value"], 4) == 0.0412


def test_without_a_barometer_the_hole_is_left_out_and_said(judged):
    conditions = {"supply_pressure": "80 psi", "orifice_diameter": "0.040 in"}
    judgement = judged("leak_down", {"2": "60 psi"}, conditions=conditions)

    assert [one["characteristic"] for one in judgement["derived"]] == ["leak_down.loss"]
    assert "Equivalent orifice of cylinder 2 is left out: no barometer is known." in judgement["warnings"]


@pytest.mark.parametrize(("reading", "verdict"), [("60 psi", "within"), ("59 psi", "beyond")])
def test_a_quarter_lost_exactly_is_not_over_under_simple(reading, verdict, judged, derived):
    limit = [{"characteristic": "leak_down.loss", "upper": "25 %", "decision_rule": "simple"}]
    judgement = judged("leak_down", {"1": reading}, limits=limit, conditions={"supply_pressure": "80 psi"})

    assert derived(judgement, "leak_down.loss", "1")["verdict"] == verdict


def test_where_the_air_came_out_stays_with_the_loss(judged, derived):
    conditions = {"supply_pressure": "80 psi", "escapes": {"2": ["exhaust"]}}
    judgement = judged("leak_down", {"2": "40 psi"}, conditions=conditions)

    assert derived(judgement, "leak_down.loss", "2")["escapes"] == ["exhaust"]


@pytest.mark.parametrize(("reading", "word"), [("1 psi", "overlap"), ("80 psi", "air line")])
def test_a_loss_near_none_or_all_asks_for_another_look(reading, word, judged, finding):
    judgement = judged("leak_down", {"1": reading}, conditions={"supply_pressure": "80 psi"})

    assert any(word in note for note in finding(judgement, "1")["notes"])


# --- bore


BORE = {"1.top.thrust": "100.058 mm", "1.top.axial": "100.032 mm", "1.middle.thrust": "100.034 mm",
        "1.middle.axial": "100.021 mm", "1.bottom.thrust": "100.016 mm", "1.bottom.axial": "100.010 mm"}  # fmt: skip


@pytest.mark.parametrize(
    ("characteristic", "value"),
    [("bore.taper", 0.042), ("bore.out_of_round", 0.026), ("bore.wear", 0.058), ("bore.piston_clearance", 0.118)],
)
def test_a_bore_gives_what_it_derives(characteristic, value, judged, derived):
    conditions = {"original_diameter": "100.000 mm", "piston_diameters": {"1": "99.940 mm"}}
    judgement = judged("bore", BORE, conditions=conditions)

    assert derived(judgement, characteristic, "1")["value"] == value


def test_the_smallest_clearance_stands_beside_the_largest(judged, derived):
    judgement = judged("bore", BORE, conditions={"piston_diameters": {"1": "99.940 mm"}})

    assert derived(judgement, "bore.piston_clearance", "1")["smallest"] == 0.076


def test_a_size_is_referred_to_20_degrees_where_temperatures_and_materials_are_given(judged, finding):
    conditions = {"part_temperature": "23.7 °C", "part_material": "steel"}
    judgement = judged("bore", {"1.top.thrust": "500.035 mm"}, conditions=conditions)

    assert finding(judgement, "1.top.thrust")["value"] == pytest.approx(500.013, abs=5e-4)  # NPL worked correction


def test_a_gap_is_never_referred_to_20_degrees(judged, finding):
    judgement = judged("valve_lash", {"1.intake": "0.30 mm"}, conditions={"part_temperature": "90 °C"})

    assert finding(judgement, "1.intake")["value"] == 0.30


def test_a_comparators_deviation_is_added_to_its_set_size(judged, finding):
    conditions = {"set_size": "100.000 mm", "set_uncertainty": "0.002 mm", "zero_before": "0.000 mm", "zero_after": "+0.002 mm",
                  "division": "0.001 mm"}  # fmt: skip
    found = finding(
        judged("bore", {"1.top.thrust": "+0.058", "1.top.axial": "-0.003"}, conditions=conditions), "1.top.axial"
    )

    assert found["value"] == pytest.approx(100.0 - 0.003 - 0.001)
    assert any("zero moved by 0.002 mm" in note for note in found["notes"])


@pytest.mark.parametrize(("way", "size"), [("worn_hole", 0.50), ("original_axis", 0.75)])
def test_an_oversize_cleans_up_by_the_way_it_is_bored(way, size, judged, derived):
    conditions = {"original_diameter": "100.000 mm", "oversizes": ["0.25 mm", "0.50 mm", "0.75 mm"],
                  "cleanup_allowance": "0.10 mm", "bored_on": way}  # fmt: skip
    judgement = judged("bore", {"1.top.thrust": "100.210 mm"}, conditions=conditions)

    assert derived(judgement, "bore.oversize", "1")["value"] == size


def test_an_oversize_that_hangs_on_the_way_it_is_bored_is_asked_about(judged):
    conditions = {
        "original_diameter": "100.000 mm",
        "oversizes": ["0.25 mm", "0.50 mm", "0.75 mm"],
        "cleanup_allowance": "0.10 mm",
    }
    judgement = judged("bore", {"1.top.thrust": "100.210 mm"}, conditions=conditions)

    assert not [one for one in judgement["derived"] if one["characteristic"] == "bore.oversize"]
    assert any(
        "0.5 mm bored on the worn hole, 0.75 mm on the original axis" in warning for warning in judgement["warnings"]
    )
