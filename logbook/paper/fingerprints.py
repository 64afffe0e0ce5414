"""The fingerprint of a sheet: one number for exactly what stands on it, the same on every machine."""

import hashlib
import json
from collections.abc import Mapping


def canonical(sheet: Mapping[str, object]) -> bytes:
    """Write a sheet as JSON in the one way that a fingerprint is made from: keys sorted, no spaces, UTF-8.

    Raises
    ------
    TypeError, ValueError
        The sheet holds something that JSON has no word for: a date, a set, a number that isn't finite, a key that
        is no text (it would come back as one).
    """
    _refuse_other_keys(sheet)
    text = json.dumps(sheet, sort_keys=True, separators=(",", ":"), ensure_ascii=False, allow_nan=False)
    return text.encode()


def fingerprint(sheet: Mapping[str, object]) -> str:
    """SHA-256 of a sheet's canonical JSON, 64 hexadecimal digits.

    Source: the digest of the two bytes `{}` is the one that `printf '{}' | sha256sum` gives.

    >>> fingerprint({})
    '44136fa355b3678a1146ad16f7e8649e94fb4fc21fe77e8310c060f61caaff8a'
    """
    return hashlib.sha256(canonical(sheet)).hexdigest()


def _refuse_other_keys(value: object) -> None:
    if isinstance(value, Mapping):
        for name, inner in value.items():
            if not isinstance(name, str):
                raise TypeError(f"A sheet's names are texts; {name!r} isn't.")
            _refuse_other_keys(inner)
    elif isinstance(value, list | tuple):
        for inner in value:
            _refuse_other_keys(inner)
