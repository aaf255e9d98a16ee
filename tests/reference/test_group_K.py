"""Group K: rules of the trade. Effective widths of slabs; more of them by hand in `test_effective_width`."""

import pytest
from commands import FOOT, INCH
from printed import half_a_digit, rows

from fishbelly.member.effective_rules import Layout, aisc_360, en_1992, zero_moment_zones
from fishbelly.member.spans import Span

ROWS = rows("K")


def test_K14() -> None:
    """Span 30 ft, beams at 10 ft: an eighth of the span governs on either side."""
    row = ROWS["K14"]
    (zone,) = aisc_360(Layout((5 * FOOT, 5 * FOOT), 0.2, [Span(1, 0.0, 30 * FOOT)]))
    half_a_digit(zone.width / INCH, row["value"]["be"], row, "be")
    assert zone.width / INCH == pytest.approx(row["computed"]["be"], rel=1e-12)
    # the other two of the three, in the row's title: half the distance, the edge
    for sides, width in (((2.0, 2.0), 4.0), ((0.5, 2.0), 2.5)):
        (zone,) = aisc_360(Layout(sides, 0.2, [Span(1, 0.0, 30.0)]))
        assert zone.width == pytest.approx(width, rel=1e-12)


def test_K16() -> None:
    """Three spans of 10, 8 and 9 m and a cantilever of 2 m: l_0 of every stretch over its lengths."""
    printed = ROWS["K16"]["value"]
    spans = [Span(1, 0.0, 10.0), Span(2, 10.0, 18.0), Span(3, 18.0, 27.0), Span("right", 27.0, 29.0)]
    layout = Layout((2.0, 1.0), 0.4, spans)
    found = [l_0 for *_, l_0 in zero_moment_zones(layout)]
    end, over, inner = printed["l_end"], printed["l_sup"], printed["l_int"]
    assert found == pytest.approx([end * 10, over * 18, inner * 8, over * 17, inner * 9, over * 9 + 2], rel=1e-12)
    for zone, l_0 in zip(en_1992(layout), found, strict=True):
        parts = [min(0.2 * b + 0.1 * l_0, 0.2 * l_0, b) for b in (1.8, 0.8)]
        assert zone.width == pytest.approx(0.4 + sum(parts), rel=1e-12)
