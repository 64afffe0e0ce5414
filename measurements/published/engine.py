"""Published values for layout and geometry."""

from measurements import geometry
from measurements.check_value import CheckValue
from measurements.engine import Engine

SIX = Engine("inline", 6, (1, 5, 3, 6, 2, 4), bore=4, stroke=4)
EIGHT = Engine("vee", 8, (1, 8, 4, 3, 6, 5, 7, 2), bore=4.00, stroke=3.48, rod_length=5.70)

_SHEET = "a piston maker's calculation sheet, printed example"
_CRANK = "slider-crank equation of any text on engine kinematics, stroke 90, rod 145"


def companions(engine: Engine) -> str:
    """Companion pairs in firing order."""
    first_half = engine.firing_order[: engine.cylinders // 2]
    return " ".join(f"{cylinder}/{engine.companion(cylinder)}" for cylinder in first_half)


PUBLISHED = [
    CheckValue("displacement of six cylinders 4 × 4 in [in³]", "301.593", lambda: SIX.displacement(),
               _SHEET, "seen", "bore taken as radius: 1206.372"),
    CheckValue("compression ratio, swept 823.70, clearance 100.00 cm³", "9.237",
               lambda: geometry.compression_ratio(823.70, 100.00), _SHEET, "seen", "swept over clearance: 8.237"),
    CheckValue("rod ratio, rod 6.0, stroke 3.5 in", "1.714",
               lambda: Engine("inline", 1, stroke=3.5, rod_length=6.0).rod_ratio(), _SHEET, "seen",
               "stroke over rod: 0.583"),
    CheckValue("mean piston speed, stroke 90 mm at 3000 rpm [m/s]", "9",
               lambda: Engine("inline", 1, stroke=90, rated_speed=3000).mean_piston_speed(),
               "encyclopaedia article on mean piston speed, example", "seen", "one stroke a turn: 4.5"),
    CheckValue("mean piston speed, stroke 85 mm at 5500 rpm [m/s]", "15.58",
               lambda: Engine("inline", 1, stroke=85, rated_speed=5500).mean_piston_speed(),
               "encyclopaedia article on mean piston speed, example", "seen", "one stroke a turn: 7.79"),
    CheckValue("piston below TDC at 10° [mm]", "0.8944", lambda: geometry.piston_depth(10, 90, 145), _CRANK,
               "from memory", "rod left out, r (1 − cos θ): 0.6837"),
    CheckValue("piston below TDC at 90° [mm]", "52.1595", lambda: geometry.piston_depth(90, 90, 145), _CRANK,
               "from memory", "rod left out: 45.0000"),
    CheckValue("crank angle of half the stroke [deg]", "81.07", lambda: geometry.angle_at_depth(45, 90, 145), _CRANK,
               "from memory", "rod left out: 90.00"),
    CheckValue("crank angle of 0.01 mm below TDC [deg]", "1.055", lambda: geometry.angle_at_depth(0.01, 90, 145),
               _CRANK, "from memory", "rod left out: 1.208"),
    CheckValue("rise from BDC when the intake shuts 70° after it, stroke 3.48, rod 5.70 in [in]", "0.9053",
               lambda: EIGHT.stroke - EIGHT.piston_depth(180 + 70),
               "engine-building article on static and dynamic compression ratio (stroke and rod from memory)", "seen",
               "rod left out: 1.1449"),
    CheckValue("4.00 in bore, 3.48 in stroke", "oversquare", lambda: EIGHT.proportions(),
               "bore larger than stroke is oversquare", "common practice", "words changed about: undersquare"),
    CheckValue("4 in bore, 4 in stroke", "square", lambda: SIX.proportions(),
               "bore equal to stroke is square", "common practice", "comparing bore with crank radius: oversquare"),
    CheckValue("firing interval of an even six [deg]", "120", lambda: SIX.firing_interval(),
               "firing interval 720/n of a four-stroke", "common practice", "one turn, 360/n: 60"),
    CheckValue("companions of 1-5-3-6-2-4", "1/6 5/2 3/4", lambda: companions(SIX),
               "companion cylinders: half the firing order away", "common practice",
               "next in the order: 1/5 5/3 3/6"),
    CheckValue("companions of 1-8-4-3-6-5-7-2", "1/6 8/5 4/7 3/2", lambda: companions(EIGHT),
               "pairs that share a coil on a common V8", "from memory", "numbers mirrored, n + 1 − k: 1/8 8/1 4/5 3/6"),
]  # fmt: skip
