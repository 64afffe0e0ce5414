"""Sentences for the person at the engine: template text and its values, so that a page can translate and format them."""

from collections.abc import Mapping
from dataclasses import dataclass, field


@dataclass(frozen=True)
class Sentence:
    """One sentence: `template` with named `{places}`, and the `values` that fill them.

    >>> str(say("Read {read}, which is under {limit} {unit}.", read="0.18", limit=0.25, unit="mm"))
    'Read 0.18, which is under 0.25 mm.'
    """

    template: str
    values: Mapping[str, object] = field(default_factory=dict)

    def __str__(self) -> str:
        return self.template.format(**{name: plain(value) for name, value in self.values.items()})


def say(template: str, **values: object) -> Sentence:
    """Make a sentence; `template` must be a literal, for translators collect it from the call."""
    return Sentence(template, values)


def plain(value: object) -> object:
    """Write a number the way a person does: six significant digits, of large sizes four decimals; no everyday exponents."""
    if isinstance(value, float):
        if 100 <= abs(value) < 1e6:  # a 250.0135 mm bore is not 250.013
            return f"{value:.4f}".rstrip("0").rstrip(".")
        text = f"{value:.6g}"
        return f"{value:.12f}".rstrip("0").rstrip(".") if "e-" in text and abs(value) > 1e-9 else text
    return value


class Refusal(ValueError):
    """Something typed that can't be taken; its sentence says what was read, what is wrong and what to do."""

    def __init__(self, template: str, **values: object) -> None:
        self.sentence = Sentence(template, values)
        super().__init__(str(self.sentence))
