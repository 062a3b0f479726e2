"""One rendering of the sample for all tests of the room: laying out costs seconds."""

import pytest

from rankdocket.render.rendition import Rendition, render
from render.sample import draft, sample


@pytest.fixture(scope="session")
def rendition() -> Rendition:
    return render(sample())


@pytest.fixture(scope="session")
def drafted() -> Rendition:
    return render(draft())
