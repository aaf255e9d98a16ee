"""The second method shares nothing with the first, and shows faults planted in it."""

from __future__ import annotations

import ast
import dataclasses
import importlib
from pathlib import Path

import numpy as np
import pytest
from second_members import (
    AGREES,
    I_TAPER,
    MEMBERS,
    SHOWS,
    TAPER,
    first,
    member,
    second,
)

import fishbelly.member
from fishbelly.member import actions as first_actions
from fishbelly.member import breakpoints as first_breaks
from fishbelly.member import panels as first_panels
from fishbelly.member import sampling
from fishbelly.member.actions import Frame
from fishbelly.member.description import (
    Member,
)
from fishbelly.member.loads import (
    Distributed,
    SelfWeight,
)
from fishbelly.sections import composition as first_composition
from fishbelly.sections.area_moments import AreaMoments, area_moments
from fishbelly.sections.outlines import Outline

ALLOWED = {
    "fishbelly.member.description",
    "fishbelly.member.faults",
    "fishbelly.member.geometry",
    "fishbelly.member.laws",
    "fishbelly.member.loads",
    "fishbelly.member.moduli",
    "fishbelly.member.openings",
    "fishbelly.member.questions",
    "fishbelly.member.stage_view",
    "fishbelly.sections.outlines",
}


def test_shares_nothing_with_the_first_method_but_the_description() -> None:
    folder = Path(fishbelly.member.__file__).parent
    files = sorted(folder.glob("second_*.py"))
    assert len(files) >= 5
    own = {f"fishbelly.member.{f.stem}" for f in files}
    for file in files:
        for node in ast.walk(ast.parse(file.read_text(encoding="utf-8"))):
            names = []
            if isinstance(node, ast.ImportFrom):
                assert node.level == 0
                names = [node.module or ""]
            elif isinstance(node, ast.Import):
                names = [a.name for a in node.names]
            for name in names:
                assert not name.startswith("fishbelly") or name in ALLOWED | own, f"{file.name} imports {name}"
    # and what they do import of the description leads to no way of computing sections or forces
    for name in ALLOWED:
        tree = ast.parse(Path(importlib.import_module(name).__file__ or "").read_text(encoding="utf-8"))
        found = {n.module for n in tree.body if isinstance(n, ast.ImportFrom)}
        assert not found & {
            f"fishbelly.sections.{n}" for n in ("area_moments", "composition", "level_cuts", "chebyshev")
        }


def _wrong_moments(outline: Outline) -> AreaMoments:
    """Shift from the point beside the outline to its centroid with the wrong sign."""
    right = area_moments(outline)
    z0 = outline.z.mean(axis=1)
    return dataclasses.replace(right, zz=right.zz + 2.0 * right.area * (right.z - z0) ** 2)


def _shown(m: Member) -> float:
    """How far the first method, with a fault in it, is from the second at the largest deflection."""
    x, w, _, slide = first(m)
    k = int(np.argmax(np.abs(w[0])))
    return float(abs(second(m, [x[k]], slide).deflection[0, 0] - w[0, k]) / np.abs(w).max())


def test_a_forgotten_breakpoint_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    m = MEMBERS["notches"]()
    assert _shown(m) < AGREES
    every = first_breaks.breakpoints
    monkeypatch.setattr(
        sampling, "breakpoints", lambda member, more=(): every(dataclasses.replace(member, notches=()), more)
    )
    assert _shown(m) > SHOWS


def test_a_wrong_sign_in_area_moments_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    m = member(I_TAPER, shear=False)
    assert _shown(m) < AGREES
    monkeypatch.setattr(first_composition, "area_moments", _wrong_moments)
    assert _shown(m) > SHOWS


def test_a_dropped_load_piece_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    m = member(TAPER, loads=(Distributed(((0.0, 1e4), (5.0, 1e4), (6.0, 2e4))), SelfWeight()))
    assert _shown(m) < AGREES
    put = first_actions._distributed

    def dropped(frame: Frame, a: object, load: Distributed, span: object) -> None:
        put(frame, a, dataclasses.replace(load, stations=load.stations[:-1]), span)

    monkeypatch.setattr(first_actions, "_distributed", dropped)
    assert _shown(m) > SHOWS


def test_a_wrong_integration_matrix_is_caught(monkeypatch: pytest.MonkeyPatch) -> None:
    m = MEMBERS["propped taper"]()
    assert _shown(m) < AGREES
    right = first_panels.rule

    def wrong(n: int) -> object:
        r = right(n)
        integrate = r.integrate.copy()
        integrate[:, n // 2] *= 1.001
        return dataclasses.replace(r, integrate=integrate)

    monkeypatch.setattr(first_panels, "rule", wrong)
    assert _shown(m) > SHOWS
