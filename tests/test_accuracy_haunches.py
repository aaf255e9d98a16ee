"""Haunches and members of two materials against integrals of 30 digits."""

# ruff: noqa: E731 - formulas stand as formulas
from __future__ import annotations

import mpmath as mp
import pytest
from common import (
    INF,
    PROMISED,
    STEEL,
    TIMBER,
    check_close,
    fixed,
    line,
    part,
    reaction,
    run,
    simple,
    simple_moment,
    station,
    uniform,
    unit_moment,
    work,
)
from taper_formulas import E, Q, fixed_fixed, rectangle_EI

from fishbelly.member.description import Haunch, Member, Placing
from fishbelly.member.laws import parabola, straight
from fishbelly.member.loads import Point


@pytest.mark.parametrize("law", ["straight", "parabola"])
def test_haunched_between_fixed_ends(law: str) -> None:
    width, thin, extra, reach, length = 0.3, 0.45, 0.45, 1.8, 9.0
    beam = part("b", "rectangle", length, width=width, depth=thin)
    haunches = (Haunch("b", 0.0, extra, (0.0, reach), law), Haunch("b", length, extra, (reach, 0.0), law))
    supports = (fixed("A", 0.0, along=INF), fixed("B", length))
    member = Member(
        length, (beam,), (STEEL,), haunches=haunches, supports=supports, loads=(uniform(Q, length),), shear=False
    )
    power = 1 if law == "straight" else 2

    def depth(x: mp.mpf) -> mp.mpf:
        fade = max(0, 1 - min(x, length - x) / mp.mpf(reach))
        return mp.mpf(thin) + mp.mpf(extra) * fade**power

    EI, places = rectangle_EI(depth, width), (0, mp.mpf(reach), length / 2, length - mp.mpf(reach), length)
    M = simple_moment(Q, length)
    left, right = fixed_fixed(M, EI, places, length)
    found = run(member, 0.0, 2.5, 4.5)
    check_close(reaction(found, "A", "moment"), left, PROMISED)
    check_close(reaction(found, "B", "moment"), -right, PROMISED)
    check_close(found["moment"]["hogging"]["value"], left, PROMISED)
    whole = lambda x: M(x) + left
    for x in (2.5, 4.5):
        check_close(station(found, x)["deflection"], work(whole, unit_moment(x, length), EI, (*places, x)), PROMISED)


def test_thrust_of_a_haunched_beam_held_along_at_both_ends() -> None:
    """The centroid drops towards the ends, so that holding them along x brings thrust: three redundants."""
    width, thin, extra, reach, length = mp.mpf(0.3), mp.mpf(0.45), mp.mpf(0.45), mp.mpf(1.8), 9.0
    beam = part("b", "rectangle", length, width=0.3, depth=0.45)
    haunches = (Haunch("b", 0.0, 0.45, (0.0, 1.8), "parabola"), Haunch("b", length, 0.45, (1.8, 0.0), "parabola"))
    supports = (fixed("A", 0.0, along=INF), fixed("B", length, along=INF))
    member = Member(
        length, (beam,), (STEEL,), haunches=haunches, supports=supports, loads=(uniform(Q, length),), shear=False
    )
    places = (0, reach, length / 2, length - reach, length)
    depth = lambda x: thin + extra * max(0, 1 - min(x, length - x) / reach) ** 2
    EI, EA = rectangle_EI(depth, 0.3), lambda x: E * width * depth(x)
    # by symmetry one end moment m about the datum line (top edge) and the axial force n: M = M0 + m + n z_c
    z = lambda x: -depth(x) / 2
    one, M = (lambda x: mp.mpf(1)), simple_moment(Q, length)
    f = mp.matrix(2, 2)
    f[0, 0], f[0, 1] = work(one, one, EI, places), work(one, z, EI, places)
    f[1, 0], f[1, 1] = f[0, 1], work(z, z, EI, places) + work(one, one, EA, places)
    m, n = mp.lu_solve(f, -mp.matrix([work(M, one, EI, places), work(M, z, EI, places)]))
    found = run(member, 0.0, 2.5, 4.5)
    check_close(station(found, 2.5)["N"], n, PROMISED)
    check_close(reaction(found, "A", "along"), -n, PROMISED)
    check_close(station(found, 0.0)["M"], m + n * z(0), PROMISED)
    whole = lambda x: M(x) + m + n * z(x)
    check_close(station(found, 4.5)["deflection"], work(whole, unit_moment(4.5, length), EI, places), PROMISED)


def test_parabolic_soffit_of_two_materials() -> None:
    """A timber that deepens along a parabola with a steel plate under part of it.

    Where the soffit slopes by tan a the plate stands t / cos a deep and counts with E cos⁴ a along the member.
    """
    length = 8.0
    depth_law = parabola([0.0, 3.0], [0.9, 0.45], [3.0])
    timber = part("timber", "rectangle", length, material="timber", width=0.2, depth=depth_law)
    plate = part("plate", "rectangle", 6.5, start=1.5, width=0.18, depth=0.012, place=Placing("under", "timber"))
    member = Member(
        length, (timber, plate), (STEEL, TIMBER), supports=simple(length), loads=(uniform(Q, length),), shear=False
    )

    def EI(x: mp.mpf) -> mp.mpf:
        h = mp.mpf(0.45) + mp.mpf(0.45) * (max(0, mp.mpf(3) - x) / 3) ** 2
        ea = mp.mpf(11e9) * mp.mpf(0.2) * h
        own = ea * h**2 / 12
        if not 1.5 < x < 6.5:
            return own
        cos = 1 / mp.sqrt(1 + (mp.mpf(0.1) * max(0, mp.mpf(3) - x)) ** 2)
        t = mp.mpf(0.012) / cos
        steel = E * cos**4 * mp.mpf(0.18) * t
        return own + steel * t**2 / 12 + ea * steel / (ea + steel) * ((h + t) / 2) ** 2

    found = run(member, 0.0, 2.0, 4.0)
    places = (0, 1.5, 2, 3, 4, 6.5, 8)
    M = simple_moment(Q, length)
    for x in (2.0, 4.0):
        check_close(station(found, x)["deflection"], work(M, unit_moment(x, length), EI, places), PROMISED)
    check_close(station(found, 0.0)["slope"], work(M, lambda x: 1 - x / mp.mpf(8), EI, places), PROMISED)


def test_pair_of_timbers_with_steel_between() -> None:
    length = 6.0
    depth = line(0, 0.30, length, 0.15)
    law = straight([0.0, length], [0.30, 0.15])
    steel = part("steel", "rectangle", 4.0, start=1.0, width=0.012, depth=0.14)
    core = part("packing", "rectangle", length, material="timber", width=0.012, depth=0.14)
    timber = part(
        "timber",
        "rectangle",
        length,
        material="timber",
        width=0.05,
        depth=law,
        place=Placing("left_of", "packing", flush="top"),
    )
    timber = type(timber)(**{f: getattr(timber, f) for f in timber.__dataclass_fields__} | {"pair": True})
    steel = type(steel)(
        **{f: getattr(steel, f) for f in steel.__dataclass_fields__} | {"place": Placing("centred_on", "packing")}
    )
    member = Member(
        length, (core, timber, steel), (STEEL, TIMBER), supports=simple(length), loads=(Point(2.0, 8e3),), shear=False
    )
    t = mp.mpf(0.14)

    def EI(x: mp.mpf) -> mp.mpf:
        h = depth(x)
        e1, a1 = (E if 1 < x < 4 else mp.mpf(11e9)), mp.mpf(0.012) * t
        e2, a2 = mp.mpf(11e9), 2 * mp.mpf(0.05) * h
        arm = (h - t) / 2
        one, two = e1 * a1, e2 * a2
        return one * t**2 / 12 + two * h**2 / 12 + one * two / (one + two) * arm**2

    found = run(member, 3.0)
    expected = 8000 * work(unit_moment(2.0, length), unit_moment(3.0, length), EI, (0, 1, 2, 3, 4, 6))
    check_close(station(found, 3.0)["deflection"], expected, PROMISED)
