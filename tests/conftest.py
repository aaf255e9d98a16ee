"""Settings all tests share: property tests run the short profile unless FISHBELLY_FULL=1 asks for the long one."""

from __future__ import annotations

import os

import pytest
from hypothesis import HealthCheck, Phase, settings

# members take a few milliseconds each and the first one imports the geometry library: no deadline for one example
_COMMON = {"deadline": None, "suppress_health_check": [HealthCheck.too_slow, HealthCheck.data_too_large]}
# a failure of the short profile is shown as found; the long one looks for the smallest member that fails
_SHORT = (Phase.explicit, Phase.reuse, Phase.generate)
settings.register_profile("fast", max_examples=7, derandomize=True, phases=_SHORT, **_COMMON)
settings.register_profile("full", max_examples=200, **_COMMON)
FULL = os.environ.get("FISHBELLY_FULL") == "1"
settings.load_profile("full" if FULL else "fast")


def pytest_collection_modifyitems(items: list[pytest.Item]) -> None:
    if FULL:
        return
    skip = pytest.mark.skip(reason="slow; set FISHBELLY_FULL=1")
    for item in items:
        if item.get_closest_marker("full"):
            item.add_marker(skip)
