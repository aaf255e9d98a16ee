"""Answers of the worked jobs in which shear counts and is no rectangle's: each number computed a second time.

A function takes the text of its job and gives the values stated, as `worked_answers` says. Shear stiffness is that of
closed forms with Poisson's ratio zero: 6/7 GA of a circle, that of a ring, parts fastened side by side by their EI. Of
the rolled section alone it is the package's own, which `test_flexure_reference` holds against other elements.
"""

from math import hypot, pi
from typing import Any

import numpy as np
import pytest
from by_hand import Along, integral, moment_simple, shear_simple, stepped
from commands import INCH, MM, MPA, changed
from flexure_shapes import make, plate, solve
from scipy.optimize import minimize_scalar
from test_flexure_closed import ring
from worked_run import Values, answer, both, check, down, peak

g = 9.80665


def flitch_beam(text: str) -> Values:
    """Timbers and plate share the deflection alone: EI adds, V goes as EI, GA = (ΣEI)² / Σ(EI²/GA)."""
    L, a = 4.2, 0.2
    I, A = 2 * 0.063 * 0.22**3 / 12, 2 * 0.063 * 0.22
    EI_s, GA_s = 210e9 * 0.012 * 0.19**3 / 12, 5 / 6 * 81e9 * 0.012 * 0.19

    def sag(w: float, w_plate: float, E: float, creep: float = 0.0) -> float:
        EI_t, GA_t = E * I / (1 + creep), 5 / 6 * 690e6 * A / (1 + creep)
        together = (EI_t + EI_s) ** 2 / (EI_t**2 / GA_t + EI_s**2 / GA_s)
        EI = stepped((a, L - a, EI_t + EI_s), other=EI_t)
        GA = stepped((a, L - a, together), other=GA_t)
        m, v = moment_simple(L, 0.0, [(1.0, L / 2)]), shear_simple(L, 0.0, [(1.0, L / 2)])

        def M(x: Any) -> Any:
            near = np.minimum(x, L - x)
            return w * x * (L - x) / 2 + w_plate * (near * (L - 2 * a) / 2 - np.clip(near - a, 0, None) ** 2 / 2)

        def V(x: Any) -> Any:
            return w * (L / 2 - x) + w_plate * ((L - 2 * a) / 2 - np.clip(x - a, 0, L - 2 * a))

        return integral(lambda x: M(x) * m(x) / EI(x) + V(x) * v(x) / GA(x), [0, a, L / 2, L - a, L])

    own, own_plate = 3.4e3 + g * 420 * A, g * 7850 * 0.012 * 0.19

    def last(E: float) -> float:
        return sag(own + 0.3 * 4.6e3, own_plate, E, 0.6) + sag(0.7 * 4.6e3, 0.0, E)

    result = answer("flitch-beam", text)["by_name"]
    imposed, final = check(result["imposed"], "imposed load"), check(result["final"], "final")
    (joint,) = result["final"]["joints"]
    assert joint["part"] == "plate"
    return [
        (both(imposed["found"], sag(4.6e3, 0.0, 11e9)) / MM, "7.23 mm"),
        (both(imposed["allowed"], L / 360) / MM, "11.67 mm"),
        (both(final["found"], last(11e9)) / MM, "14.72 mm"),
        (both(final["allowed"], L / 250) / MM, "16.80 mm"),
        (final["used"] * 100, "88 %"),
        (both(final["band"]["low"], last(7.4e9)) / MM, "16.74 mm"),
    ]


def pump_shaft(text: str) -> Values:
    a, b, E, G = 0.04, 0.29, 205e9, 205e9 / 2.58
    ends, sizes = (0.0, 0.07, 0.26, 0.33, 0.41, 0.51), (0.04, 0.05, 0.045, 0.038, 0.03)
    pieces = [(ends[k], ends[k + 1], d) for k, d in enumerate(sizes)]
    EI = stepped(*((p, q, E * pi * d**4 / 64) for p, q, d in pieces))
    GA = stepped(*((p, q, 6 / 7 * G * pi * d**2 / 4) for p, q, d in pieces))

    def forces(*loads: tuple[float, float, float]) -> tuple[Along, Along, float]:
        """Moment, shear and what the left bearing carries of loads (force, from, to)."""
        right = sum(P * ((p + q) / 2 - a) for P, p, q in loads) / (b - a)
        left = sum(P for P, _, _ in loads) - right

        def ramp(x: Any, p: float, q: float) -> Any:
            """Moment of one newton spread from p to q about x, seen from the right."""
            if q == p:
                return np.clip(x - p, 0, None)
            return (np.clip(x - p, 0, None) ** 2 - np.clip(x - q, 0, None) ** 2) / 2 / (q - p)

        def passed(x: Any, p: float, q: float) -> Any:
            return (x > p) * 1.0 if q == p else np.clip((x - p) / (q - p), 0, 1)

        def M(x: Any) -> Any:
            loaded = sum(P * ramp(x, p, q) for P, p, q in loads)
            return left * np.clip(x - a, 0, None) + right * np.clip(x - b, 0, None) - loaded

        def V(x: Any) -> Any:
            return left * (x > a) + right * (x > b) - sum(P * passed(x, p, q) for P, p, q in loads)

        return M, V, left

    weight = [(7850 * g * pi * d**2 / 4 * (q - p), p, q) for p, q, d in pieces]
    M, V, left = forces(*weight, (48.0, 0.48, 0.48), (1500.0, 0.48, 0.48))
    breaks = [*ends, a, b, 0.37, 0.48]

    def sag(at: float) -> float:
        m, v, _ = forces((1.0, at, at))
        return integral(lambda x: M(x) * m(x) / EI(x) + V(x) * v(x) / GA(x), breaks)

    # a couple at the pump bearing, clockwise: its moment falls from there to the drive bearing
    turn = lambda x: np.where((x > a) & (x < b), -(x - a) / (b - a), 0.0)  # noqa: E731
    push = lambda x: np.where((x > a) & (x < b), -1 / (b - a), 0.0)  # noqa: E731
    rotation = integral(lambda x: M(x) * turn(x) / EI(x) + V(x) * push(x) / GA(x), breaks)
    result = answer("pump-shaft", text)["by_name"]["shut off"]
    seal, wheel, bearing = (check(result, n) for n in ("seal face", "running clearance", "pump bearing"))
    return [
        (both(seal["found"], sag(0.37)) / MM, "0.0624 mm"),
        (seal["allowed"] / MM, "0.08 mm"),
        (both(wheel["found"], sag(0.48)) / MM, "0.233 mm"),
        (wheel["allowed"] / MM, "0.30 mm"),
        (both(bearing["found"], rotation) / 1e-3, "0.466 mrad"),
        (both(-result["supports"][0]["vertical"], -left), "1161 N"),
    ]


def tapered_arm(text: str) -> Values:
    """In pounds and inches; a ring's shear flexibility in closed form, its walls thicker than a thin tube's by far."""
    L, s, t, E, G = 264.0, 222.0, 0.25, 29e6, 11.2e6
    D = lambda x: 12.0 - 6.0 * x / L  # noqa: E731

    def soft(x: Any) -> Any:
        """1/GA."""
        return np.array([ring(d / 2 - t, d / 2) for d in D(x)]) / G

    def EI(x: Any) -> Any:
        return E * pi / 64 * (D(x) ** 4 - (D(x) - 2 * t) ** 4)

    # weight per length is linear: q = q0 + q1 x
    q0, q1 = 490 / 1728 * pi * t * (12.0 - t), 490 / 1728 * pi * t * (-6.0 / L)

    def tip(M: Along, V: Along) -> float:
        return integral(lambda x: M(x) * (L - x) / EI(x) + V(x) * soft(x), [0, s, L])

    def dead_M(x: Any) -> Any:
        r = L - x
        return 310 * np.clip(s - x, 0, None) + (q0 + q1 * x) * r**2 / 2 + q1 * r**3 / 3

    def dead_V(x: Any) -> Any:
        r = L - x
        return 310.0 * (x < s) + (q0 + q1 * x) * r + q1 * r**2 / 2

    sag = tip(dead_M, dead_V)
    aside = tip(lambda x: 1050 * np.clip(s - x, 0, None), lambda x: 1050.0 * (x < s))
    result = answer("tapered-arm", text)["by_name"]
    (dead, wind), all_load = (check(result[n], n) for n in ("dead", "wind")), check(result["dead and wind"], "both")
    return [
        (both(dead["found"] / INCH, sag), "0.803 in"),
        (both(dead["allowed"] / INCH, 2 * L / 240), "2.20 in"),
        (both(wind["found"] / INCH, aside), "1.657 in"),
        (both(wind["allowed"] / INCH, 2 * L / 180), "2.93 in"),
        (both(all_load["found"] / INCH, hypot(sag, aside)), "1.841 in"),
        (both(all_load["allowed"] / INCH, 2 * L / 150), "3.52 in"),
    ]


def _ipe_270() -> tuple[float, float]:
    """Area and second moment with the root fillets: a square corner less a quarter of a disc."""
    d, b, tw, tf, r = 0.27, 0.135, 0.0066, 0.0102, 0.015
    area, own = (1 - pi / 4) * r**2, (1 / 3 - pi / 16 - 1 / (9 * (4 - pi))) * r**4
    off = d / 2 - tf - r * (10 - 3 * pi) / (12 - 3 * pi)
    A = 2 * b * tf + (d - 2 * tf) * tw + 4 * area
    return A, (b * d**3 - (b - tw) * (d - 2 * tf) ** 3) / 12 + 4 * (own + area * off**2)


def plated_beam(text: str) -> Values:
    a, L, E, G = 6.0, 10.5, 210e9, 81e9
    A, I = _ipe_270()
    more = 0.11 * 0.01
    z = -(A * 0.135 + more * 0.275) / (A + more)
    plated = I + A * (z + 0.135) ** 2 + 0.11 * 0.01**3 / 12 + more * (z + 0.275) ** 2
    flanges = {"top_width": 0.135, "bottom_width": 0.135, "top_flange": 0.0102, "bottom_flange": 0.0102}
    rolled = make("I", depth=0.27, web=0.0066, radius=0.015, **flanges)
    GA = [float(solve(o, ((E, G),) * len(o)).GA_z[0]) for o in ((rolled,), (rolled, plate(0.11, 0.01, 0.0, -0.14)))]
    w_beam, w_plate = g * 7850 * A, g * 7850 * more

    class Beam:
        """Two spans with the middle support's moment as the unknown."""

        def __init__(self, with_plate: bool, left: float, right: float, weight: bool) -> None:
            self.EI = stepped((1.2, 4.2, E * plated), other=E * I) if with_plate else stepped(other=E * I)
            self.GA = stepped((1.2, 4.2, GA[1]), other=GA[0]) if with_plate else stepped(other=GA[0])
            self.left, self.right = left + w_beam * weight, right + w_beam * weight
            self.patch = w_plate * (weight and with_plate)
            over, slope = self.over, self.slope
            soft = integral(lambda x: over(x) ** 2 / self.EI(x) + slope(x) ** 2 / self.GA(x), self.breaks)
            free = integral(
                lambda x: self.free_M(x) * over(x) / self.EI(x) + self.free_V(x) * slope(x) / self.GA(x), self.breaks
            )
            self.X = -free / soft

        breaks = (0.0, 1.2, 4.2, a, L)

        @staticmethod
        def over(x: Any) -> Any:
            return np.where(x <= a, x / a, (L - x) / (L - a))

        @staticmethod
        def slope(x: Any) -> Any:
            return np.where(x <= a, 1 / a, -1 / (L - a))

        def free_M(self, x: Any) -> Any:
            first = self.left * x * (a - x) / 2
            hold = self.patch * 3.0 * (a - 2.7) / a
            first = (
                first + hold * x - self.patch * (np.clip(x - 1.2, 0, None) ** 2 - np.clip(x - 4.2, 0, None) ** 2) / 2
            )
            return np.where(x <= a, first, self.right * (x - a) * (L - x) / 2)

        def free_V(self, x: Any) -> Any:
            first = self.left * (a / 2 - x) + self.patch * (3.0 * (a - 2.7) / a - np.clip(x - 1.2, 0, 3.0))
            return np.where(x <= a, first, self.right * ((L + a) / 2 - x))

        def M(self, x: Any) -> Any:
            return self.free_M(x) + self.X * self.over(x)

        def sag(self, at: float) -> float:
            m = lambda x: np.where(x > a, 0.0, np.where(x < at, x * (a - at), at * (a - x)) / a)  # noqa: E731
            v = lambda x: np.where(x > a, 0.0, np.where(x < at, a - at, -at) / a)  # noqa: E731
            V = lambda x: self.free_V(x) + self.X * self.slope(x)  # noqa: E731
            return integral(lambda x: self.M(x) * m(x) / self.EI(x) + V(x) * v(x) / self.GA(x), [*self.breaks, at])

        def largest(self) -> float:
            return peak(self.sag, 2.0, 3.5)

    part, full = Beam(True, 11e3, 0.0, False), Beam(True, 20e3, 9e3, True)
    bare_part, bare_full = Beam(False, 11e3, 0.0, False), Beam(False, 20e3, 9e3, True)
    most = -float(minimize_scalar(lambda x: -full.M(np.array(x)), bounds=(1.5, 3.5), method="bounded").fun)
    over = abs(full.X) * 0.135 / I
    result = answer("plated-beam", text)["by_name"]
    cut = text[text.index('[[part]]\nname = "plate"') : text.index("[[support]]")]
    bare = answer("plated-beam", changed(text, (cut, "")))["by_name"]
    imposed, whole = check(result["imposed"], "imposed load"), check(result["all"], "all load")
    beam, plate_ = (check(result["all"], f"strength of {n}") for n in ("beam", "plate"))
    # beside the plate's ends and over the column the bare beam is stressed less than this
    top = most * -z / plated
    edges = max(float(full.M(np.array(x))) * 0.135 / I for x in (1.2, 4.2))
    assert max(over, edges) < top or beam["found"] == pytest.approx(max(over, edges), rel=1e-6)
    return [
        (both(imposed["found"], part.largest()) / MM, "8.84 mm"),
        (both(imposed["allowed"], a / 360) / MM, "16.67 mm"),
        (both(whole["found"], full.largest()) / MM, "14.82 mm"),
        (both(whole["allowed"], a / 250) / MM, "24.00 mm"),
        (both(beam["found"], max(top, over, edges)) / MPA, "141.1 MPa"),
        (beam["allowed"] / MPA, "180 MPa"),
        (beam["used"] * 100, "78 %"),
        (both(plate_["found"], most * (z + 0.28) / plated) / MPA, "102.7 MPa"),
        (both(down(bare["imposed"]), bare_part.largest()) / MM, "10.49 mm"),
        (both(down(bare["all"]), bare_full.largest()) / MM, "17.60 mm"),
    ]
