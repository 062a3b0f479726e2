"""Reproducible streams of random bits, each found by its address."""

from hashlib import sha256
from typing import Final

import numpy as np

WORD_BYTES: Final = 4
BETWEEN_WORDS: Final = "\x1f"
"""Unit separator: it stands in no name, so that ("ab", "c") and ("a", "bc") are two addresses."""


def stream(seed: int, *words: str) -> np.random.Generator:
    """Return the generator that belongs to ``seed`` (0 or more) and an address such as study, association, purpose.

    Equal addresses give equal bits; adding, reordering or leaving out other addresses changes nothing.
    """
    digest = sha256(BETWEEN_WORDS.join(words).encode("utf-8")).digest()
    parts = [int.from_bytes(digest[start : start + WORD_BYTES], "big") for start in range(0, len(digest), WORD_BYTES)]
    return np.random.Generator(np.random.PCG64(np.random.SeedSequence([seed, *parts])))
