"""The measuring library's sentences in the reader's language."""

from django.utils.translation import gettext as _

from measurements.sentence import Sentence, plain


def in_words(sentence: Sentence) -> str:
    """Translate a sentence's template and fill in its values."""
    return _(sentence.template).format(**{name: plain(value) for name, value in sentence.values.items()})
