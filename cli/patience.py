"""A word on stderr while something takes longer than a second; silent where nobody watches."""

from __future__ import annotations

import sys
from collections.abc import Iterator
from contextlib import contextmanager
from threading import Lock, Timer
from typing import Any

AFTER = 1.0
"""Seconds of silence."""


@contextmanager
def patience(words: str, after: float = AFTER) -> Iterator[None]:
    """Show that work goes on, if it goes on for longer than a while and stderr is a terminal.

    Parameters
    ----------
    words : str
        What is being done.
    after : float
        Seconds after which it is said.
    """
    if not sys.stderr.isatty():
        yield
        return
    lock = Lock()
    shown: list[Any] = []
    over = False

    def show() -> None:
        from rich.console import Console

        with lock:
            if not over:
                status = Console(stderr=True).status(words)
                status.start()
                shown.append(status)

    timer = Timer(after, show)
    timer.daemon = True
    timer.start()
    try:
        yield
    finally:
        timer.cancel()
        with lock:
            over = True
            for status in shown:
                status.stop()
