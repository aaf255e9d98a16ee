"""Progress is shown on a terminal after a while, and nowhere else."""

from __future__ import annotations

import io
import sys
import time

import pytest

from fishbelly.cli.patience import patience


class Terminal(io.StringIO):
    """A stream that says it is a terminal."""

    def isatty(self) -> bool:
        return True


def test_silent_in_a_pipe(monkeypatch: pytest.MonkeyPatch) -> None:
    stream = io.StringIO()
    monkeypatch.setattr(sys, "stderr", stream)
    with patience("solving", after=0.0):
        time.sleep(0.1)
    assert stream.getvalue() == ""


def test_silent_while_it_is_quick(monkeypatch: pytest.MonkeyPatch) -> None:
    stream = Terminal()
    monkeypatch.setattr(sys, "stderr", stream)
    with patience("solving", after=30.0):
        pass
    assert stream.getvalue() == ""


def test_said_on_a_terminal_when_it_takes_long(monkeypatch: pytest.MonkeyPatch) -> None:
    stream = Terminal()
    monkeypatch.setattr(sys, "stderr", stream)
    monkeypatch.setenv("TERM", "xterm")
    with patience("solving the member", after=0.01):
        time.sleep(0.5)
    assert "solving the member" in stream.getvalue()
