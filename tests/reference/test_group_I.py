"""Group I: parts joined by fasteners that slip: the gamma-method, and exact partial interaction beside it.

Rows I3 and I4 have one section: 300 x 50 of 12 GPa on 50 x 150 of 8 GPa. I3 is its length 4 m with 50 N/mm/mm.
"""

import math

import pytest
from printed import half_a_digit, rows
from slip_members import Run, composite

from fishbelly.member.gamma_method import gamma_method, gamma_spans

ROWS = rows("I")


def test_I1() -> None:
    """Two flanges of a lattice of boards: gamma of one, EI of two pairs about their common middle per width.

    The joists between them count with nothing of their own: a middle part of next to no stiffness.
    """
    row = ROWS["I1"]
    given = row["inputs"]
    slip = given["rho"] ** 1.5 * given["d"] ** 0.8 / 30 * 1e3
    half_a_digit(slip / 1e3, row["value"]["Kser"], row, "Kser")
    b, h, E = given["b0"] / 1e3, given["h0"] / 1e3, given["E"] * 1e6
    arm = 0.5 * (given["h"] + given["h0"]) / 1e3
    k = slip / (given["s"] / 1e3)
    own = E * b * h**3 / 12
    found = gamma_method([E * b * h, 1e-6, E * b * h], [own, 0.0, own], [arm, 0.0, -arm], [k, 0.0, k], 5.0, middle=1)
    assert found.n == 3
    half_a_digit(found.gamma[0], row["value"]["gamma"], row, "gamma")
    assert found.gamma[0] == pytest.approx(row["computed"]["gamma"], rel=1e-7)
    EI = given["n"] * found.EI / (given["span"] / 1e3)
    half_a_digit(EI, row["value"]["EI"], row, "EI")
    assert EI == pytest.approx(row["computed"]["EI"], rel=1e-7)


def test_I3() -> None:
    row = ROWS["I3"]
    (span,) = gamma_spans(Run(composite(4.0, 5e7)).law)
    assert span.result is not None
    assert (span.result.n, span.result.length, span.reason) == (2, 4.0, "")
    assert (span.apart, span.rigid) == pytest.approx((150e3, 600e3), rel=1e-12)
    half_a_digit(span.result.EI / 1e3, row["value"]["EIef"], row, "EIef")
    half_a_digit(math.pi**2 * span.result.EI / 16.0 / 1e3, row["value"]["Pcr"], row, "Pcr")


@pytest.mark.parametrize("name", ["I4-L2-k5e+07", "I4-L4-k500000"])
def test_uniform_load(name: str) -> None:
    row = ROWS[name]
    L, k = row["inputs"]["L"], row["inputs"]["k"]
    run = Run(composite(L, k))
    w = float(run.value(run.respond()[0].deflection[0], 0.5 * L))
    half_a_digit(w * 1e3, row["value"]["w_exact"], row, "w_exact")
    (span,) = gamma_spans(run.law)
    assert span.result is not None
    half_a_digit(5 * 1e3 * L**4 / (384 * span.result.EI) * 1e3, row["value"]["w_gamma"], row, "w_gamma")
