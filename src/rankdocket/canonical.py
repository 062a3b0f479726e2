"""The one JSON byte form of the house, and digests of bytes.

Follows RFC 8785 (JSON Canonicalization Scheme) with a stricter profile: no floating-point number may stand in
it, so that no two processors and no two libraries can disagree about its bytes.  Exact values travel as
strings: integers of any size, fractions ``a/b``, decimals.
"""

import hashlib
import json
from collections.abc import Mapping, Sequence
from typing import Final, TypeAlias

Plain: TypeAlias = "str | int | bool | Mapping[str, Plain] | Sequence[Plain] | None"
"""Data that has a canonical form: text, whole numbers below 2**53, true, false, null, lists and objects."""

LARGEST_INTEGER: Final = 2**53 - 1
"""Largest whole number that every JSON reader keeps exactly (RFC 8785 section 3.2.2.3, RFC 7493 section 2.2)."""


def canonical_bytes(data: Plain) -> bytes:
    """Return the canonical UTF-8 bytes of ``data``: sorted keys, no blanks.

    Raises
    ------
    TypeError
        If a float, a non-text key or any other object stands in it.
    ValueError
        If a whole number is too large for other readers, or text is not valid Unicode.
    """
    return json.dumps(_ordered(data), ensure_ascii=False, separators=(",", ":"), allow_nan=False).encode("utf-8")


def readable_bytes(data: Plain) -> bytes:
    """Return the same data with the same key order, indented for people, with a newline at the end."""
    return (json.dumps(_ordered(data), ensure_ascii=False, indent=1, allow_nan=False) + "\n").encode("utf-8")


def sha256(data: bytes) -> str:
    """Return the SHA-256 digest of ``data`` as 64 lower-case hexadecimal digits."""
    return hashlib.sha256(data).hexdigest()


def digest_of(data: Plain) -> str:
    """Return the SHA-256 digest of the canonical form of ``data``."""
    return sha256(canonical_bytes(data))


def _ordered(data: Plain) -> Plain:
    if data is None or isinstance(data, (str, bool)):
        return data
    if isinstance(data, int):
        if abs(data) > LARGEST_INTEGER:
            raise ValueError(f"{data} is too large for a JSON number: file it as text")
        return data
    if isinstance(data, Mapping):
        for key in data:
            if not isinstance(key, str):
                raise TypeError(f"{key!r} is not a text key")
        # RFC 8785 sorts by UTF-16 code units, which differs from code points beyond the basic plane.
        return {key: _ordered(data[key]) for key in sorted(data, key=lambda text: text.encode("utf-16-be"))}
    if isinstance(data, (list, tuple)):
        return [_ordered(item) for item in data]
    raise TypeError(f"{type(data).__name__} has no canonical form: {data!r}")
