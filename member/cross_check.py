"""The governing deflection by the second method, and reactions against loads."""

from __future__ import annotations

from typing import Any

from fishbelly.member.analysis import Analysis, Combined


def cross_check(analysis: Analysis, combined: Combined, deflection: dict[str, Any]) -> dict[str, Any] | None:
    return None
