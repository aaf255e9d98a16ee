"""Effective widths of slabs along the member: both rules by hand, and that only stiffness knows of them."""

import re

import pytest
from commands import INCH, command, section

from fishbelly.cli.faults import JobFaults
from fishbelly.cli.job_file import read_job
from fishbelly.member.effective_rules import Layout, aisc_360, en_1992, outside_figure
from fishbelly.member.spans import Span

EN = 'effective = { rule = "EN 1992-1-1", web_spacing = "3 m" }'


def job(effective: str, width: str = '"3 m"', supports: str = "0 8 18", length: str = "20 m", more: str = "") -> str:
    """A slab over a web 300 wide, on rollers."""
    held = "".join(
        f'[[support]]\nat = "{x} m"\nkind = "{"pin" if k == 0 else "roller"}"\n' for k, x in enumerate(supports.split())
    )
    parts = "".join(
        f'[[part]]\nname = "{name}"\nmaterial = "C30/37"\nshape = "rectangle"\n'
        f'width = {wide}\ndepth = "{deep}"\n{rest}\n'
        for name, wide, deep, rest in (
            ("web", '"300 mm"', "600 mm", ""),
            ("slab", width, "150 mm", f'over = "web"\n{effective}'),
        )
    )
    return f'length = "{length}"\n{parts}{held}[[load]]\nkind = "self weight"\n{more}'


def widths(text: str, x: float, side: str = "right") -> tuple[float, float]:
    """Given and effective width at x, and that the area of the slab is that of the effective one."""
    slab = section(text, f"{x} m", "--side", side)["parts"][1]
    assert slab["area"] == pytest.approx(0.15 * slab["width"]["effective"], rel=1e-12)
    return slab["width"]["given"], slab["width"]["effective"]


def test_en_along_two_spans_and_a_cantilever() -> None:
    """b_i = 1.5 - 0.15 = 1.35 m on either side; l_0 = 0.85·8, 0.15·18, 0.7·10, 0.15·10 + 2 m.

    0.2 b_i + 0.1 l_0 is 0.95, 0.54, 0.97 and 0.62 m; 0.2 l_0 is as little over the support alone, 0.54 m.
    """
    text = job(EN)
    for x, wide in ((4.0, 2.2), (8.0, 1.38), (12.0, 2.24), (19.0, 1.54)):
        assert widths(text, x) == pytest.approx((3.0, wide), rel=1e-12)
    for x, left, right in ((6.8, 2.2, 1.38), (9.5, 1.38, 2.24), (16.5, 2.24, 1.54)):
        assert widths(text, x, "left")[1] == pytest.approx(left, rel=1e-12)
        assert widths(text, x, "right")[1] == pytest.approx(right, rel=1e-12)
    breaks = [s["x"] for s in command("stiffness", text)["stations"] if s["break"]]
    assert {6.8, 9.5, 16.5} <= {round(x, 9) for x in breaks}


def test_K16_figures_of_single_spans_and_fixed_ends() -> None:
    def l_0(spans: list[Span], held: tuple[bool, bool] = (False, False)) -> list[tuple[float, float, float]]:
        # a slab without end: 0.2 l_0 governs, so that the width is 0.4 l_0
        zones = en_1992(Layout((1e3, 1e3), 0.0, spans, held))
        return [pytest.approx((z.start, z.end, z.width / 0.4)) for z in zones]

    assert l_0([Span(1, 0.0, 10.0)]) == [(0.0, 10.0, 10.0)]
    assert l_0([Span(1, 0.0, 10.0)], (True, False)) == [(0.0, 1.5, 3.0), (1.5, 10.0, 8.5)]
    assert l_0([Span(1, 0.0, 10.0), Span(2, 10.0, 16.0)]) == [(0, 8.5, 8.5), (8.5, 10.9, 2.4), (10.9, 16.0, 5.1)]
    assert l_0([Span("left", 0.0, 2.0), Span(1, 2.0, 12.0)]) == [(0.0, 3.5, 3.5), (3.5, 12.0, 8.5)]
    assert l_0([Span("right", 0.0, 4.0)]) == [(0.0, 4.0, 4.0)]


def test_where_figure_5_2_ends() -> None:
    near = [Span(1, 0.0, 8.0), Span(2, 8.0, 18.0), Span("right", 18.0, 20.0)]
    assert not outside_figure(Layout((1.0, 1.0), 0.0, near))
    assert outside_figure(Layout((1.0, 1.0), 0.0, [Span(1, 0.0, 6.0), Span(2, 6.0, 16.0)]))
    assert outside_figure(Layout((1.0, 1.0), 0.0, [Span(1, 0.0, 6.0), Span("right", 6.0, 9.0)]))
    notes = command("deflect", job(EN, supports="0 6 16"))["notes"]
    assert any("here it is used beyond" in note for note in notes)


def test_K14_aisc_span_30_ft_beams_at_10_ft() -> None:
    text = job('effective = { rule = "AISC 360", web_spacing = "10 ft" }', '"10 ft"', "0", "30 ft")
    text += '[[support]]\nat = "30 ft"\nkind = "roller"\n'
    assert widths(text, 4.0)[1] / INCH == pytest.approx(90.0, rel=1e-12)
    edge = text.replace('web_spacing = "10 ft"', 'web_spacing = "10 ft", edge = "2 ft"')
    assert widths(edge, 4.0)[1] / INCH == pytest.approx(45.0 + 24.0, rel=1e-12)
    spans = [Span(1, 0.0, 8.0), Span(2, 8.0, 16.0), Span("right", 16.0, 18.0)]
    assert [z.width for z in aisc_360(Layout((1.5, 0.9), 0.3, spans))] == pytest.approx([1.9, 1.9, 0.5])


def test_never_wider_than_given() -> None:
    """A slab that is narrower than the rule over a part of its length: nothing is cut there."""
    text = job(EN, '[["0 m", "1 m"], ["8 m", "3 m"], ["20 m", "3 m"]]')
    for x, wide in ((2.0, 1.5), (4.0, 2.0), (6.0, 2.2)):
        assert widths(text, x)[1] == pytest.approx(wide, rel=1e-9)
    # 1 + x / 4 = 2.2 at 4.8 m
    assert any(s["x"] == pytest.approx(4.8, rel=1e-9) for s in command("stiffness", text)["stations"] if s["break"])
    same = command("deflect", job('effective = { rule = "EN 1992-1-1", web_spacing = "30 m" }', '"600 mm"'))
    plain = command("deflect", job("", '"600 mm"'))
    found, wanted = (r["combinations"][0]["deflection"]["down"]["value"] for r in (same, plain))
    assert found == pytest.approx(wanted, rel=1e-12)


def test_stiffness_of_a_narrow_slab_weight_of_the_wide_one() -> None:
    """One span: the same as a slab drawn with the effective width under the load of the wide one's weight."""
    effective = job(EN, supports="0 10", length="10 m")
    (given, wide) = widths(effective, 5.0)
    assert wide == pytest.approx(2 * (0.2 * 1.35 + 0.1 * 10) + 0.3, rel=1e-12)
    lost = (given - wide) * 0.15 * 2400 * 9.80665
    drawn = job("", f'"{wide!r} m"', "0 10", "10 m", f'[[load]]\nkind = "uniform"\nvalue = "{lost!r} N/m"\n')
    density = section(effective, "5 m")["mass"] - section(drawn, "5 m")["mass"]
    assert density == pytest.approx((given - wide) * 0.15 * 2400, rel=1e-9)
    a, b = (command("deflect", text)["combinations"][0] for text in (effective, drawn))
    for key in ("value", "shear_part"):
        # the slab is cut from a wider one: its edges are met by level cuts, not by its outline's corners
        assert a["deflection"]["down"][key] == pytest.approx(b["deflection"]["down"][key], rel=1e-7)
    assert a["supports"][0]["vertical"] == pytest.approx(b["supports"][0]["vertical"], rel=1e-12)
    assert a["cross_check"]["difference"] < 1e-9


def test_the_note_shows_both_widths() -> None:
    (note,) = [n for n in command("deflect", job(EN))["notes"] if n.startswith("slab: effective width")]
    assert re.search(r"1 380 mm to 2 240 mm of 3 000 mm by EN 1992-1-1:2004, 5.3.2.1", note)
    assert "300.0 mm of web as the width of the web" in note
    assert "weight is that of the whole width" in note


@pytest.mark.parametrize(
    ("effective", "said"),
    [
        ('effective = { rule = "BS 8110" }', 'expected one of "EN 1992-1-1", "AISC 360", got "BS 8110"'),
        ('effective = { web_spacing = "3 m" }', 'effective.rule: expected one of "EN 1992-1-1", "AISC 360"'),
        ('effective = { rule = "AISC 360", spacing = "3 m" }', 'unknown key "spacing"'),
        ('effective = { rule = "AISC 360", edge = "0 m" }', "effective.edge"),
        ('effective = "EN 1992-1-1"', "expected a table such as"),
        (EN + '\nturn = "10 deg"', "turned"),
    ],
)
def test_refused(effective: str, said: str) -> None:
    with pytest.raises(JobFaults) as caught:
        read_job("-", job(effective))
    assert said in str(caught.value)


def test_a_flange_of_an_i_is_refused() -> None:
    text = job("").replace('width = "300 mm"\ndepth = "600 mm"', f'width = "300 mm"\ndepth = "600 mm"\n{EN}')
    text = text.replace('shape = "rectangle"\n', 'shape = "I"\nweb = "20 mm"\nflange = "30 mm"\n', 1)
    with pytest.raises(JobFaults) as caught:
        read_job("-", text)
    assert 'expected a rectangle, whose width is a slab\'s, got "I"' in str(caught.value)
