"""The look's contrasts, computed from the style sheet's own tokens for light, dark and print."""

import re
from pathlib import Path

import pytest

TOKENS = (Path(__file__).resolve().parents[2] / "logbook/core/static/core/tokens.css").read_text(encoding="utf-8")
LIGHT, DARK, PRINT = (
    dict(re.findall(r"--([a-z]+): (#[0-9a-f]{6});", part)) for part in re.split(r"@media[^{]*", TOKENS)
)
SCHEMES = {"light": LIGHT, "dark": DARK, "print": PRINT}
PROMISED = [  # ratio, ink, on what; WCAG 2.2 asks 7:1 of text at level AAA, 3:1 of shapes
    (15, "reading", ("paper", "sheet")),
    (7, "ink", ("paper", "sheet", "wash")),
    (7, "soft", ("paper", "sheet", "wash")),
    (4.5, "within", ("paper", "sheet", "wash")),
    (4.5, "near", ("paper", "sheet", "wash")),
    (4.5, "beyond", ("paper", "sheet", "wash")),
    (4.5, "focus", ("paper", "sheet", "wash")),
]


def luminance(colour: str) -> float:
    """Relative luminance. Source: WCAG 2.2, definition of relative luminance."""
    parts = [int(colour[at : at + 2], 16) / 255 for at in (1, 3, 5)]
    red, green, blue = (part / 12.92 if part <= 0.04045 else ((part + 0.055) / 1.055) ** 2.4 for part in parts)
    return 0.2126 * red + 0.7152 * green + 0.0722 * blue


def contrast(one: str, other: str) -> float:
    """Contrast ratio. Source: WCAG 2.2, definition of contrast ratio."""
    dark, light = sorted((luminance(one), luminance(other)))
    return (light + 0.05) / (dark + 0.05)


def test_contrast_agrees_with_print():
    assert contrast("#ffffff", "#000000") == 21  # WCAG 2.2: ratios run from 1 to 21
    assert (
        f"{contrast('#767676', '#ffffff'):.2f}" == "4.54"
    )  # the lightest grey that passes 4.5:1 on white: common practice


@pytest.mark.parametrize("scheme", SCHEMES)
@pytest.mark.parametrize(("ratio", "ink", "grounds"), PROMISED, ids=lambda value: str(value))
def test_every_promised_contrast_holds(scheme, ratio, ink, grounds):
    tokens = SCHEMES[scheme]
    poor = {ground: round(contrast(tokens[ink], tokens[ground]), 2) for ground in grounds}
    assert {ground: got for ground, got in poor.items() if got < ratio} == {}


def test_every_scheme_sets_every_ink():
    assert set(DARK) == set(LIGHT) == set(PRINT)


def test_the_inks_of_the_verdicts_are_those_that_every_eye_tells_apart():
    assert (LIGHT["within"], LIGHT["beyond"]) == ("#0b5a8a", "#a35200")
