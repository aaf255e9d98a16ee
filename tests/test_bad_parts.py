"""Every fault of the parts of a job is told: placing, outlines, laws, cuts and growths."""

# ruff: noqa: E501 (a job and its message stand side by side, unbroken, as they are written)

import pytest
from bad_jobs import BASE, HEAD, STEEL, only_fault, plate, shape

BAD = {
    # parts
    "no name": (BASE.replace('name = "beam"', ""), ":5: part 1, name: expected a name, but it is missing"),
    "no shape": (
        HEAD + STEEL + '[[part]]\nname = "a"\nmaterial = "steel"\n',
        ':5: part "a", shape: expected a shape with its dimensions, or a `size` of the catalogue, but it is missing',
    ),
    "unknown shape": (
        shape('shape = "rectangel"\nwidth = "1 m"'),
        ':8: part "a", shape: expected the name of an outline, got "rectangel"; did you mean "rectangle"?',
    ),
    "unknown size": (
        shape('size = "IPE 305"'),
        ':8: part "a", size: expected a designation of the catalogue, got "IPE 305"; nearest are "IPE',
    ),
    "size and width": (
        shape('size = "IPE 300"\nwidth = "1 m"'),
        ':9: part "a": unknown key "width"; a part with `size` has its dimensions from the catalogue',
    ),
    "misspelt dimension": (
        BASE.replace("width", "widht"),
        ':9: part "beam": unknown key "widht"; did you mean "width"?',
    ),
    "strange dimension": (
        BASE + 'flange = "1 mm"\n',
        ':11: part "beam": unknown key "flange" for shape = "rectangle"; its dimensions are width, depth',
    ),
    "missing dimension": (
        BASE.replace('width = "100 mm"', ""),
        ':5: part "beam", width: expected a length such as "12 mm", or a law along x, but it is missing',
    ),
    "negative depth": (
        BASE.replace("200 mm", "-120 mm"),
        ':10: part "beam", depth: expected a length above 0 mm, got "-120 mm"',
    ),
    "reversed part": (
        BASE + 'from = "3 m"\nto = "2 m"\n',
        ':12: part "beam", to: expected a place beyond the start at 3 m, got "2 m"',
    ),
    "part off the member": (
        BASE + 'to = "7 m"\n',
        ':11: part "beam", to: expected a place within the member, 0 to 6 m, got "7 m"',
    ),
    "same name": (
        BASE + plate('under = "beam"', "beam"),
        ':12: part "beam", name: expected a name that no other has, got "beam" again',
    ),
    "long run-in": (
        BASE + 'run_in = "4 m"\n',
        ':11: part "beam", run_in: expected lengths that fit into the part\'s 6 m, got 8 m in all',
    ),
    "no material": (
        BASE.replace('material = "steel"\n', ""),
        ':5: part "beam", material: expected a material, or `cut` with the parts it cuts, but it is missing',
    ),
    "cut with material": (
        BASE + plate('cut = true\ncentred_on = "beam"'),
        ':13: part "plate", material: a part with cut = true has no material',
    ),
    "cut of nothing": (
        BASE
        + plate('under = "beam"')
        + '[[part]]\nname = "g"\nshape = "circle"\ndiameter = "1 mm"\ncut = true\nunder = "beam"\n',
        ':18: part "g", of: expected the part or parts that are cut, as there is not just one other part, but it is missing',
    ),
    "of without cut": (
        BASE + 'of = "beam"\n',
        ':11: part "beam", of: `of` belongs to a part with cut = true',
    ),
    # placing
    "no placing": (
        BASE + plate(""),
        ':11: part "plate": a part after the first needs a placing: under, over, left_of, right_of, centred_on or position',
    ),
    "two placings": (
        BASE + plate('under = "beam"\nover = "beam"'),
        ':18: part "plate", over: expected only one of `under`, `over`, `left_of`, `right_of`, `centred_on`, `position`, got also `under`',
    ),
    "unknown host": (
        BASE + plate('under = "bean"'),
        ':17: part "plate", under: expected the name of a part, got "bean"; did you mean "beam"?',
    ),
    "forward": (
        BASE + plate('under = "late"') + plate('under = "beam"', "late"),
        ':17: part "plate", under: expected an earlier part, got "late", which comes later',
    ),
    "itself": (
        BASE + plate('under = "plate"'),
        ':17: part "plate", under: expected an earlier part, got "plate" itself',
    ),
    "circle": (
        BASE + plate('under = "b"', "a") + plate('under = "a"', "b"),
        ':17: part "a", under: expected an earlier part, got a circle: "a" on "b" on "a"',
    ),
    "host absent": (
        BASE + 'to = "5 m"\n' + plate('under = "beam"'),
        ':18: part "plate", under: expected a part present from 0 m to 6 m, got "beam", absent from 5 m to 6 m',
    ),
    "wrong flush": (
        BASE + plate('under = "beam"\nflush = "top"'),
        ':18: part "plate", flush: expected one of "left", "middle", "right", got "top"',
    ),
    "anchor without position": (
        BASE + plate('under = "beam"\nanchor = "top"'),
        ':18: part "plate", anchor: `anchor` needs `position`',
    ),
    "pair on the datum": (
        BASE + "pair = true\n",
        ':11: part "beam", pair: a pair needs a placing: both copies would stand in one place',
    ),
    # outlines
    "thick wall": (
        shape('shape = "tube"\ndiameter = "100 mm"\nwall = "50 mm"'),
        ':10: part "a", wall: expected a wall of less than half the diameter, got "50 mm"',
    ),
    "thick flanges": (
        shape('shape = "I"\ndepth = "30 mm"\nweb = "7 mm"\nwidth = "150 mm"\nflange = "16 mm"'),
        ':12: part "a", flange: expected flanges that together are no thicker than the depth, got "16 mm"',
    ),
    "no flange": (
        shape('shape = "I"\ndepth = "300 mm"\nweb = "7 mm"\nwidth = "150 mm"'),
        ':5: part "a", flange: expected a length, or `top_flange` and `bottom_flange` instead, but it is missing',
    ),
    "box without wall": (
        shape('shape = "box"\ndepth = "300 mm"\nwidth = "150 mm"'),
        ':5: part "a", wall: expected a length, or `web` and `flange` instead, but it is missing',
    ),
    "bars overlap": (
        shape('shape = "bars"\ncount = 3\ndiameter = "20 mm"\nspacing = "10 mm"'),
        ':11: part "a", spacing: expected a spacing of at least the diameter, got "10 mm"',
    ),
    "half a bar": (
        shape('shape = "bars"\ncount = 2.5\ndiameter = "20 mm"\nspacing = "30 mm"'),
        ':9: part "a", count: expected a whole number of at least 1, got 2.5',
    ),
    "two points": (
        shape('shape = "polygon"\npoints = [["0 m", "0 m"], ["1 m", "0 m"]]'),
        ':9: part "a", points: expected at least three points',
    ),
    "crossing": (
        shape('shape = "polygon"\npoints = [["0 m", "0 m"], ["1 m", "1 m"], ["1 m", "0 m"], ["0 m", "1 m"]]'),
        ':9: part "a", points: expected an outline that does not cross or touch itself, got one that does so at y = 0.5 m, z = 0.5 m',
    ),
    "hole outside": (
        shape(
            'shape = "polygon"\npoints = [["0 m", "0 m"], ["1 m", "0 m"], ["1 m", "1 m"]]\nholes = [[["5 m", "5 m"], ["6 m", "5 m"], ["6 m", "6 m"]]]'
        ),
        ':10: part "a", holes, hole 1: expected a hole inside the outline, got one that reaches its edge or beyond',
    ),
    # laws
    "stations out of order": (
        BASE.replace('"200 mm"', '[["1 m", "2 m"], ["0 m", "1 m"]]'),
        ':10: part "beam", depth, station 2: expected an x not before the one listed before, "1 m", got "0 m"',
    ),
    "three values at one x": (
        BASE.replace('"200 mm"', '[["1 m", "2 m"], ["1 m", "1 m"], ["1 m", "3 m"]]'),
        ':10: part "beam", depth, station 3: expected at most two values at one x, got "1 m"',
    ),
    "value without unit": (
        BASE.replace('"200 mm"', '[["1 m", "2 m"], ["2 m", "1"]]'),
        ':10: part "beam", depth, station 2: expected a length such as "12 mm", got "1": the unit is missing',
    ),
    "short steps": (
        BASE.replace('"200 mm"', '{ steps = [["1 m", "2 m"], ["5 m", "1 m"]] }'),
        ':10: part "beam", depth.steps: expected steps up to the end of the part at 6 m, got a last x of "5 m"',
    ),
    "nowhere flat": (
        BASE.replace('"200 mm"', '{ law = "parabola", stations = [["0 m", "2 m"], ["5 m", "1 m"]] }'),
        ':10: part "beam", depth.flat_at: the piece from 0 m to 5 m is flat at neither end, expected one',
    ),
    "flat elsewhere": (
        BASE.replace('"200 mm"', '{ law = "parabola", stations = [["0 m", "2 m"], ["5 m", "1 m"]], flat_at = "4 m" }'),
        ':10: part "beam", depth.flat_at: expected the x of one of its stations, got "4 m"',
    ),
    "negative at the far end": (
        BASE.replace(
            '"200 mm"',
            '{ law = "parabola", stations = [["0 m", "0 m"], ["3 m", "0 m"], ["6 m", "1 m"]], flat_at = "3 m" }',
        ),
        ':10: part "beam", depth: expected a length above 0 m all along the part, got 0 m',
    ),
    "unknown law key": (
        BASE.replace('"200 mm"', '{ step = [["6 m", "2 m"]] }'),
        ':10: part "beam", depth: expected a length or a law along x',
    ),
    # cuts and growths
    "notch of nothing": (
        BASE + '[[notch]]\nof = "bean"\ndepth = "1 mm"\nfrom = "0 m"\nto = "1 m"\n',
        ':12: notch 1, of: expected the name of a part, got "bean"; did you mean "beam"?',
    ),
    "deep notch": (
        BASE + '[[notch]]\nof = "beam"\ndepth = "200 mm"\nfrom = "0 m"\nto = "1 m"\n',
        ':13: notch 1, depth: expected less than the depth of "beam" at x = 0 m, 0.2 m, got "200 mm"',
    ),
    "wide notch": (
        BASE + '[[notch]]\nof = "beam"\ndepth = "150 mm"\nside = "left"\nfrom = "0 m"\nto = "1 m"\n',
        ':13: notch 1, depth: expected less than the width of "beam" at x = 0 m, 0.1 m, got "150 mm"',
    ),
    "haunch of a circle": (
        shape('shape = "circle"\ndiameter = "1 m"\n[[haunch]]\nof = "a"\nat = "0 m"\ndepth = "1 m"\nreach = "1 m"'),
        ':11: haunch 1, of: expected a part with a depth, got "a", a circle',
    ),
    "haunch of a turned part": (
        BASE + 'turn = "5 deg"\n[[haunch]]\nof = "beam"\nat = "0 m"\ndepth = "1 m"\nreach = "1 m"\n',
        ':13: haunch 1, of: expected a part that is not turned, got "beam", turned',
    ),
    "opening at the end": (
        BASE + '[[opening]]\nat = "0 m"\ndiameter = "100 mm"\n',
        ":12: opening 1, at: expected an opening within the member, 0 to 6 m, got -0.05 m to 0.05 m",
    ),
    "row over the end": (
        BASE + '[[opening]]\nat = "5 m"\ndiameter = "100 mm"\nspacing = "1 m"\ncount = 2\n',
        ":12: opening 1, at: expected an opening within the member",
    ),
    "half an opening": (
        BASE + '[[opening]]\nat = "3 m"\nlength = "100 mm"\n',
        ":11: opening 1, depth: expected a length, but it is missing",
    ),
    "notch reach by a rule": (
        BASE + '[[notch]]\nof = "beam"\ndepth = "20 mm"\nfrom = "0 m"\nto = "1 m"\nreach = "EN 1995-1-1"\n',
        ':16: notch 1, reach: expected a length such as "12 mm", got "EN 1995-1-1"; no published rule for the reach of a notch is in the catalogue: state the length',
    ),
}


@pytest.mark.parametrize("text, message", BAD.values(), ids=BAD.keys())
def test_fault(text, message):
    assert only_fault(text).startswith(message)
