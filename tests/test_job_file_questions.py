"""What a job file asks of the member: supports, hinges, loads, combinations and limits, in SI units."""

import math
import time

import pytest
from job_texts import BEAM, job, member

from fishbelly.cli.faults import JobFaults
from fishbelly.member.loads import (
    Axial,
    Couple,
    Distributed,
    Point,
    Prestress,
    SelfWeight,
    Shrinkage,
    Temperature,
)


def supports(text):
    return member(BEAM + text).supports


INF = math.inf


def test_supports_of_each_kind():
    got = supports(
        """
[[support]]
at = "6 m"
kind = "roller"
[[support]]
at = "4 m"
kind = "fixed"
[[support]]
at = "2 m"
kind = "spring"
vertical = "3 kN/mm"
rotation = "500 kNm/rad"
[[support]]
at = "0 m"
holds = ["down", "rotation"]
[[support]]
at = "5 m"
kind = "pin"
name = "inner"
rotation = "100 kNm/rad"
"""
    )
    assert [s.name for s in got] == ["support 5", "support 3", "support 2", "support 1", "inner"]
    roller, fixed, spring, holds, pin = got
    assert (roller.down, roller.rotation, roller.along, roller.across) == (INF, 0.0, 0.0, INF)
    # the leftmost pin or fixed one holds along; the pin at 5 m does not
    assert (fixed.down, fixed.rotation, fixed.along, fixed.rotation_across) == (INF, INF, INF, INF)
    assert (spring.down, spring.rotation, spring.across, spring.rotation_across) == (3e6, 5e5, INF, INF)
    assert (holds.down, holds.rotation, holds.along, holds.across) == (INF, INF, 0.0, INF)
    assert (pin.down, pin.rotation, pin.along) == (INF, 1e5, 0.0)


def test_supports_along_and_across():
    got = supports(
        """
[[support]]
at = "0 m"
kind = "pin"
along = "free"
across = "free"
[[support]]
at = "3 m"
kind = "pin"
across = "2 kN/mm"
level = "bottom"
sinks = "5 mm"
only = "up"
[[support]]
at = "6 m"
kind = "roller"
along = "4 kN/mm"
level = "-120 mm"
sinks = "-2 mm"
case = "jacking"
"""
    )
    assert [s.along for s in got] == [0.0, INF, 4e6]
    assert [s.across for s in got] == [0.0, 2e6, INF]
    assert (got[1].level, got[1].sinks, got[1].case, got[1].only_up) == ("bottom", 0.005, "settlement", True)
    assert (got[2].level, got[2].sinks, got[2].case) == (-0.12, -0.002, "jacking")


def test_hinges_and_stations():
    m = member(BEAM + '\n[[hinge]]\nat = "2 m"\n[[station]]\nname = "seal"\nat = "300 mm"\n')
    assert [(h.name, h.at) for h in m.hinges] == [("hinge 1", 2.0)]
    assert [(s.name, s.at) for s in m.stations] == [("seal", 0.3)]


def test_loads():
    loads = member(
        BEAM
        + """
[[load]]
kind = "self weight"
factor = 1.1
[[load]]
kind = "uniform"
value = "2.5 kN/m2"
spacing = "400 mm"
from = "1 m"
case = "live"
pattern = true
[[load]]
kind = "varying"
stations = [["0 m", "0 kN/m"], ["3 m", "5.81 kN/m"], ["6 m", "0 kN/m"]]
per = "plan"
[[load]]
kind = "point"
value = "260 lb"
at = "2 m"
direction = "across"
[[load]]
kind = "couple"
value = "3 kNm"
at = "1 m"
[[load]]
kind = "axial"
value = "-10 kN"
at = "6 m"
level = "top"
[[load]]
kind = "temperature"
top = "20 K"
bottom = "0 K"
[[load]]
kind = "temperature"
parts = { beam = "10 K" }
from = "1 m"
to = "2 m"
[[load]]
kind = "shrinkage"
part = "beam"
strain = 325e-6
creep = 2.5
[[load]]
kind = "prestress"
part = "beam"
force = "100 kN"
"""
    ).loads
    assert loads[0] == SelfWeight(factor=1.1)
    assert loads[1] == Distributed(((1.0, 1000.0), (6.0, 1000.0)), "live", pattern=True)
    assert loads[2] == Distributed(((0.0, 0.0), (3.0, 5810.0), (6.0, 0.0)), per="plan")
    assert loads[3] == Point(2.0, 1156.53761996773, direction="across")
    assert loads[4] == Couple(1.0, 3000.0)
    assert loads[5] == Axial(6.0, -10000.0, level="top")
    assert loads[6] == Temperature(0.0, 6.0, 20.0, 0.0)
    assert loads[7] == Temperature(1.0, 2.0, parts={"beam": 10.0})
    assert loads[8] == Shrinkage("beam", 325e-6, 0.0, 6.0, 2.5)
    assert loads[9] == Prestress("beam", 1e5)


def test_shrinkage_takes_the_extent_of_its_part():
    beam = BEAM + 'from = "1 m"\nto = "4 m"\n'
    (load,) = member(beam + '\n[[load]]\nkind = "shrinkage"\npart = "beam"\nstrain = 1e-4\n').loads
    assert (load.start, load.end) == (1.0, 4.0)


def test_combinations_and_limits():
    m = member(
        BEAM
        + """
[[support]]
at = "0 m"
kind = "pin"
sinks = "1 mm"
[[support]]
at = "4 m"
kind = "roller"
[[load]]
kind = "self weight"
case = "dead"
[[station]]
name = "seal"
at = "5 m"
[[combination]]
name = "final"
factors = { dead = 1, settlement = 1.0 }
sustained = { dead = 0.3 }
[[combination]]
name = "strong"
factors = { dead = 1.35 }
for = "strength"
[[limit]]
name = "spans"
span_over = 360
span = [1, "right"]
cantilever_over = 180
net = true
[[limit]]
name = "seal"
absolute = "20 mm"
at = "seal"
combination = "final"
of = "resultant"
[[limit]]
name = "turn"
slope = "1 mrad"
from = "1 m"
to = "2 m"
""",
        head='length = "6 m"\ncamber = "10 mm"\n',
    )
    assert m.cases == ("dead", "settlement")
    final, strong = m.combinations
    assert (final.factors, final.sustained, final.purpose) == (
        {"dead": 1.0, "settlement": 1.0},
        {"dead": 0.3},
        "deflection",
    )
    assert strong.purpose == "strength"
    spans, seal, turn = m.limits
    assert (spans.span_over, spans.spans, spans.cantilever_over, spans.net) == (
        360.0,
        (1, "right"),
        180.0,
        True,
    )
    assert (seal.absolute, seal.at, seal.combination, seal.of) == (0.02, "seal", "final", "resultant")
    assert (turn.slope, turn.start, turn.end) == (0.001, 1.0, 2.0)


def test_ends_in_other_units_are_the_ends():
    m = member(BEAM + 'to = "19.685039370078740 ft"\n')
    assert m.parts[0].end == 6.0


def test_a_pair_in_one_place_is_refused():
    plate = BEAM.replace('"beam"', '"plates"') + 'under = "beam"\npair = true\n'
    with pytest.raises(JobFaults, match='part "plates", pair: expected two copies that stand apart, got both'):
        job(BEAM + plate)


def test_a_modulus_of_ones_own_beside_like_keeps_poissons_ratio():
    own = '[material.softer]\nlike = "S275"\nE = "100 GPa"\n'
    (softer,) = member(BEAM.replace('"steel"', '"softer"'), materials=own).materials
    assert softer.shear_modulus == pytest.approx(100e9 / 2.6)


def test_net_needs_a_camber():
    text = BEAM + '[[support]]\nat = "0 m"\nkind = "pin"\n[[support]]\nat = "4 m"\nkind = "roller"\n'
    limit = '[[limit]]\nname = "sag"\nspan_over = 300\nnet = true\n'
    with pytest.raises(JobFaults, match='limit "sag", net: expected a job with `camber`'):
        job(text + limit)


def test_ten_thousand_stations_are_read_in_time():
    stations = ", ".join(f'["{0.6 * k} mm", "{200 + k % 7}.5 mm"]' for k in range(10_000))
    text = BEAM.replace('"200 mm"', f"[{stations}]")
    start = time.perf_counter()
    law = member(text).parts[0].shape.dimensions["depth"]
    # the contract's half second, with room for a busy machine
    assert time.perf_counter() - start < 1.5
    assert law.knots.size == 10_000
