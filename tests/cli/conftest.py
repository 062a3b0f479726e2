"""The command line runs in the process of the tests: what it makes of signals is taken back."""

import signal
from collections.abc import Iterator

import pytest


@pytest.fixture(autouse=True)
def signals_as_before() -> Iterator[None]:
    """Give back the handlers of interrupts and requests to end after each test."""
    before = {request: signal.getsignal(request) for request in (signal.SIGINT, signal.SIGTERM)}
    yield
    for request, handler in before.items():
        signal.signal(request, handler)
