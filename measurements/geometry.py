"""Bore, stroke and rod: volumes, piston speed, and where the piston is at a crank angle."""

from math import asin, degrees, isclose, pi, radians, sin, sqrt

from measurements.sentence import Refusal

CYCLE = 720.0  # crank degrees of a four-stroke cycle


def swept_volume(bore: float, stroke: float) -> float:
    """Volume [mm³] one piston sweeps; bore and stroke in mm.

    Source: common practice: area of the bore times the stroke.

    >>> round(6 * swept_volume(4, 4), 3)   # six cylinders of 4 × 4 in, in³
    301.593
    """
    return pi / 4 * bore**2 * stroke


def compression_ratio(swept: float, clearance: float) -> float:
    """Compression ratio from the swept and the clearance volume, both in one unit.

    >>> round(compression_ratio(823.70, 100.00), 3)   # cm³, a piston maker's printed example
    9.237
    """
    return (swept + clearance) / clearance


def mean_piston_speed(stroke: float, speed: float) -> float:
    """Mean piston speed [m/s] from the stroke [mm] and the crank speed [rpm].

    >>> mean_piston_speed(90, 3000)
    9.0
    """
    return 2 * stroke / 1000 * speed / 60


def proportions(bore: float, stroke: float) -> str:
    """Tell whether an engine is "square", "oversquare" (bore larger) or "undersquare" (stroke larger)."""
    if isclose(bore, stroke, rel_tol=1e-6):
        return "square"
    return "oversquare" if bore > stroke else "undersquare"


def piston_depth(angle: float, stroke: float, rod: float) -> float:
    """Distance [mm] of the piston below its TDC.

    Parameters
    ----------
    angle : float
        Crank angle after TDC [deg], any number of turns.
    stroke, rod : float
        Stroke and rod length between centres [mm]; the pin lies on the cylinder axis (no offset).

    Source: slider-crank geometry; r (1 − cos θ) + l − √(l² − r² sin² θ), r half the stroke.

    >>> round(piston_depth(90, stroke=90, rod=145), 4)
    52.1595
    """
    r, theta = stroke / 2, radians(angle % 360)
    sideways = (r * sin(theta)) ** 2
    # both terms written without a difference of near-equals, so that hundredths near TDC keep their digits
    return 2 * r * sin(theta / 2) ** 2 + sideways / (rod + sqrt(rod**2 - sideways))


def angle_at_depth(depth: float, stroke: float, rod: float) -> float:
    """Crank angle [deg], 0 to 180 either side of TDC, at which the piston is `depth` [mm] below TDC.

    Raises
    ------
    Refusal
        When the depth is not between nothing and the stroke.

    >>> round(angle_at_depth(45, stroke=90, rod=145), 2)   # half stroke comes before 90°
    81.07
    """
    if not 0 <= depth <= stroke:
        raise Refusal(
            "A piston depth of {read} mm is not between 0 and the stroke of {stroke} mm: measure from TDC down.",
            read=depth, stroke=stroke,
        )  # fmt: skip
    r = stroke / 2
    half_versine = depth * (2 * rod - depth) / (4 * r * (rod + r - depth))
    return degrees(2 * asin(sqrt(min(1.0, half_versine))))


def trapped_ratio(ratio: float, intake_closes_abdc: float, stroke: float, rod: float) -> float:
    """Compression ratio from the moment the intake shuts, which is what a cranked engine can compress.

    Parameters
    ----------
    ratio : float
        Compression ratio over the whole stroke.
    intake_closes_abdc : float
        Crank angle after BDC at which the intake is shut [deg].
    stroke, rod : float
        Stroke and rod length [mm].

    >>> round(trapped_ratio(9.0, 0, stroke=90, rod=145), 6)   # shut at BDC: nothing is lost
    9.0
    """
    return 1 + (ratio - 1) * piston_depth(180 + intake_closes_abdc, stroke, rod) / stroke
