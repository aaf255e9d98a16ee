"""Every fault of a job is told, with its place, what was expected and what was found."""

# ruff: noqa: E501 (a job and its message stand side by side, unbroken, as they are written)

import pytest

from fishbelly.cli.faults import JobFaults
from fishbelly.cli.job_file import read_job

HEAD = 'length = "6 m"\n'
STEEL = '[material.steel]\nE = "210 GPa"\npoisson = 0.3\n'
BEAM = '[[part]]\nname = "beam"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "100 mm"\ndepth = "200 mm"\n'
BASE = HEAD + STEEL + BEAM
PINS = '[[support]]\nat = "0 m"\nkind = "pin"\n[[support]]\nat = "6 m"\nkind = "roller"\n'


def plate(lines, name="plate"):
    return f'[[part]]\nname = "{name}"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "50 mm"\ndepth = "10 mm"\n{lines}\n'


def faults_of(text):
    with pytest.raises(JobFaults) as caught:
        read_job("-", text)
    return [str(fault).removeprefix("standard input") for fault in caught.value.faults]


def only_fault(text):
    faults = faults_of(text)
    assert len(faults) == 1, faults
    return faults[0]


def shape(text):
    return HEAD + STEEL + f'[[part]]\nname = "a"\nmaterial = "steel"\n{text}\n'


BAD = {
    # the file
    "empty": ("", ": the file is empty: it has no key"),
    "blank": ("# nothing\n\n", ": the file is empty: it has no key"),
    # the top level
    "no parts": (HEAD, ": part: expected at least one part, but it is missing"),
    "no length": (STEEL + BEAM, ': length: expected a length such as "12 mm", but it is missing'),
    "negative length": (BASE.replace("6 m", "-6 m"), ':1: length: expected a length above 0 mm, got "-6 m"'),
    "bare number": (
        BASE.replace('"6 m"', "6"),
        ':1: length: expected a length such as "12 mm", got 6: the unit is missing',
    ),
    "nan": (
        BASE.replace("6 m", "nan m"),
        ':1: length: expected a length such as "12 mm", got "nan m", which is not a finite number',
    ),
    "inf factor": (
        BASE.replace("0.3", "inf"),
        ':4: material "steel", poisson: expected Poisson\'s ratio above -1 and of at most 0.5, got inf, which is not a finite number',
    ),
    "misspelt key": ("titel = 'x'\n" + BASE, ':1: unknown key "titel"; did you mean "title"?'),
    "misspelt word": (
        'units = "metrik"\n' + BASE,
        ':1: units: expected "metric" or "us", got "metrik"; did you mean "metric"?',
    ),
    "yes in quotes": (
        'shear = "true"\n' + BASE,
        ':1: shear: expected true or false, got "true"; without quotes',
    ),
    "steep": ('rises = "120 deg"\n' + BASE, ':1: rises: expected an angle from -90 to 90 deg, got "120 deg"'),
    "misspelt table": (
        BASE + '[[suport]]\nat = "0 m"\n',
        ':11: unknown table "suport"; did you mean "support"?',
    ),
    "single brackets": (
        BASE + '[support]\nat = "0 m"\n',
        ":11: support: [support] with single brackets; write [[support]]: there may be several",
    ),
    "top key too low": (
        BASE + 'units = "us"\n',
        ':11: part "beam": unknown key "units"; it belongs at the top of the file, before the first table',
    ),
    "datum and position": (
        'datum = "top"\n' + BASE + 'position = ["0 mm", "0 mm"]\n',
        ":1: datum: datum and the first part's `position` both say where it is; leave one out",
    ),
    # not built yet
    "stage": (BASE + '[[stage]]\nname = "a"\n', ":11: [[stage]]: not built yet in this version"),
    "inclined": ('inclined = "cut"\n' + BASE, ':1: key "inclined": not built yet in this version'),
    "joined": (BASE + 'joined = "apart"\n', ':11: part "beam": key "joined": not built yet in this version'),
    "no tension": (
        BASE.replace("poisson", "no_tension = true\npoisson"),
        ':4: material "steel": key "no_tension": not built yet in this version',
    ),
    # materials
    "unknown material": (
        BASE.replace('= "steel"', '= "stel"'),
        ':7: part "beam", material: expected a material of the job or the catalogue, got "stel"; nearest is "steel"',
    ),
    "force for modulus": (
        BASE.replace("210 GPa", "210 kN"),
        ':3: material "steel", E: expected a modulus such as "210 GPa", got "210 kN", which is a force',
    ),
    "no E": (
        BASE.replace('E = "210 GPa"', ""),
        ':2: material "steel", E: expected a modulus, or `like` with a name of the catalogue, but it is missing',
    ),
    "unknown like": (
        BASE.replace('E = "210 GPa"', 'like = "S276"'),
        ':3: material "steel", like: expected a material of the catalogue, got "S276"; nearest are',
    ),
    "G and poisson": (
        BASE.replace("poisson", 'G = "80 GPa"\npoisson'),
        ':5: material "steel", poisson: expected either `G` or `poisson`, got both',
    ),
    "band turned round": (
        BASE.replace("poisson", 'band = ["2 GPa", "1 GPa"]\npoisson'),
        ':4: material "steel", band: expected a pair [low, high] of moduli',
    ),
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
    # supports
    "support off the member": (
        BASE + '[[support]]\nat = "9 m"\nkind = "pin"\n',
        ':12: support 1, at: expected a place within the member, 0 to 6 m, got "9 m"',
    ),
    "misspelt kind": (
        BASE + '[[support]]\nat = "0 m"\nkind = "pinn"\n',
        ':13: support 1, kind: expected "pin", "roller", "fixed" or "spring", got "pinn"; did you mean "pin"?',
    ),
    "kind and holds": (
        BASE + '[[support]]\nat = "0 m"\nkind = "pin"\nholds = ["down"]\n',
        ":14: support 1, holds: expected either `kind` or `holds`, got both",
    ),
    "neither": (
        BASE + '[[support]]\nat = "0 m"\n',
        ':11: support 1, kind: expected "pin", "roller", "fixed" or "spring", or a list `holds`, but it is missing',
    ),
    "spring of nothing": (
        BASE + '[[support]]\nat = "0 m"\nkind = "spring"\n',
        ":11: support 1, vertical: expected a stiffness under `vertical` or `rotation`, for a spring, but it is missing",
    ),
    "sinking in air": (
        BASE + '[[support]]\nat = "0 m"\nholds = ["rotation"]\nsinks = "1 mm"\n',
        ":14: support 1, sinks: a support that sinks has to hold down",
    ),
    "two at one place": (
        BASE + PINS + '[[support]]\nat = "0 m"\nkind = "roller"\nname = "x"\n',
        ':18: support "x", at: expected a place where no other support holds the same way, got 0 m, where "support 1" is',
    ),
    "hinge off the member": (
        BASE + '[[hinge]]\nat = "-1 m"\n',
        ':12: hinge 1, at: expected a place within the member, 0 to 6 m, got "-1 m"',
    ),
    # loads
    "misspelt load": (
        BASE + '[[load]]\nkind = "unifrom"\n',
        ':12: load 1 (unifrom), kind: expected one of "self weight", "uniform"',
    ),
    "kg": (
        BASE + '[[load]]\nkind = "point"\nvalue = "260 kg"\nat = "1 m"\n',
        ':13: load 1 (point), value: expected a force such as "12 kN", got "260 kg", which is a mass; kgf?',
    ),
    "load off the member": (
        BASE + '[[load]]\nkind = "point"\nvalue = "1 kN"\nat = "7 m"\n',
        ':14: load 1 (point), at: expected a place within the member, 0 to 6 m, got "7 m"',
    ),
    "long uniform load": (
        BASE + '[[load]]\nkind = "uniform"\nvalue = "1 kN/m"\nto = "7 m"\n',
        ':14: load 1 (uniform), to: expected a place within the member, 0 to 6 m, got "7 m"',
    ),
    "area without spacing": (
        BASE + '[[load]]\nkind = "uniform"\nvalue = "1 kN/m2"\n',
        ":11: load 1 (uniform), spacing: expected a length, because value is a force per area, but it is missing",
    ),
    "spacing for nothing": (
        BASE + '[[load]]\nkind = "uniform"\nvalue = "1 kN/m"\nspacing = "1 m"\n',
        ":14: load 1 (uniform), spacing: `spacing` goes with a force per area; value is a force per length",
    ),
    "varying off the member": (
        BASE + '[[load]]\nkind = "varying"\nstations = [["0 m", "1 kN/m"], ["7 m", "0 kN/m"]]\n',
        ":13: load 1 (varying), stations: expected a place within the member, 0 to 6 m, got 7 m",
    ),
    "across per plan": (
        BASE + '[[load]]\nkind = "point"\nvalue = "1 kN"\nat = "1 m"\nper = "plan"\ndirection = "across"\n',
        ":15: load 1 (point), per: a load across the member has no `per`",
    ),
    "key of another load": (
        BASE + '[[load]]\nkind = "couple"\nvalue = "1 kNm"\nat = "1 m"\ndirection = "up"\n',
        ':15: load 1 (couple): unknown key "direction"; known are',
    ),
    "half a gradient": (
        BASE + '[[load]]\nkind = "temperature"\ntop = "10 K"\n',
        ":11: load 1 (temperature), bottom: expected a temperature rise, because `top` is given, but it is missing",
    ),
    "shrinkage of nothing": (
        BASE + '[[load]]\nkind = "shrinkage"\npart = "bean"\nstrain = 1e-4\n',
        ':13: load 1 (shrinkage), part: expected the name of a part, got "bean"; did you mean "beam"?',
    ),
    "strain with a unit": (
        BASE + '[[load]]\nkind = "shrinkage"\npart = "beam"\nstrain = "1 mm"\n',
        ':14: load 1 (shrinkage), strain: expected a strain, a bare number, got "1 mm"; without quotes and unit',
    ),
    "force and strain": (
        BASE + '[[load]]\nkind = "prestress"\npart = "beam"\nstrain = 1e-4\nforce = "1 kN"\n',
        ":15: load 1 (prestress), force: expected either `force` or `strain`, got both",
    ),
    # what is needed and missing
    "no density": (
        BASE + '[[load]]\nkind = "self weight"\n',
        ':2: material "steel", density: expected a density, because self weight counts, but it is missing',
    ),
    "no expansion": (
        BASE + '[[load]]\nkind = "temperature"\ntop = "1 K"\nbottom = "2 K"\n',
        ':2: material "steel", expansion: expected a coefficient of expansion, because its temperature changes, but it is missing',
    ),
    "no G": (
        BASE.replace("poisson = 0.3", ""),
        ':2: material "steel", G: expected a shear modulus or `poisson`, because shear deformation counts (shear = false leaves it out), but it is missing',
    ),
    "no creep": (
        BASE
        + '[[load]]\nkind = "point"\nvalue = "1 kN"\nat = "1 m"\n[[combination]]\nname = "final"\nfactors = { load = 1 }\nsustained = { load = 0.3 }\n',
        ':2: material "steel", creep: expected a creep factor, because combination "final" has a sustained share, but it is missing',
    ),
    "no creep in the catalogue": (
        BASE.replace('= "steel"', '= "C24"')
        + '[[load]]\nkind = "point"\nvalue = "1 kN"\nat = "1 m"\n[[combination]]\nname = "final"\nfactors = { load = 1 }\nsustained = { load = 0.3 }\n',
        ':7: material "C24", creep: expected a creep factor, because combination "final" has a sustained share, but it is missing',
    ),
    # questions
    "unknown case": (
        BASE
        + '[[load]]\nkind = "point"\nvalue = "1 kN"\nat = "1 m"\ncase = "live"\n[[combination]]\nname = "a"\nfactors = { life = 1 }\n',
        ':18: combination "a", factors.life: expected the name of a load case, got "life"; did you mean "live"?',
    ),
    "share above one": (
        BASE
        + '[[load]]\nkind = "point"\nvalue = "1 kN"\nat = "1 m"\n[[combination]]\nname = "a"\nfactors = { load = 1 }\nsustained = { load = 1.3 }\n',
        ':18: combination "a", sustained.load: expected a share of at least 0 and of at most 1, got 1.3',
    ),
    "two limits": (
        BASE + PINS + '[[limit]]\nname = "a"\nspan_over = 360\nabsolute = "1 mm"\n',
        ':17: limit "a": expected one of `span_over`, `absolute` and `slope`, got `span_over` and `absolute`',
    ),
    "no limit": (
        BASE + PINS + '[[limit]]\nname = "a"\n',
        ':17: limit "a": expected one of `span_over`, `absolute` and `slope`, but it is missing',
    ),
    "span that is not": (
        BASE + PINS + '[[limit]]\nname = "a"\nspan_over = 360\nspan = 2\n',
        ':20: limit "a", span: expected a span of this member (1), got 2',
    ),
    "span at a station": (
        BASE + PINS + '[[station]]\nname = "s"\nat = "1 m"\n[[limit]]\nname = "a"\nspan_over = 360\nat = "s"\n',
        ':23: limit "a", at: a limit at a station needs `absolute` or `slope`: a station has no span',
    ),
    "unknown station": (
        BASE + PINS + '[[limit]]\nname = "a"\nabsolute = "1 mm"\nat = "s"\n',
        ':20: limit "a", at: expected the name of a station, got "s"',
    ),
    "unknown combination": (
        BASE + PINS + '[[limit]]\nname = "a"\nspan_over = 360\ncombination = "al"\n',
        ':20: limit "a", combination: expected the name of a combination, got "al"; did you mean "all"?',
    ),
    "station off the member": (
        BASE + '[[station]]\nname = "s"\nat = "61 m"\n',
        ':13: station "s", at: expected a place within the member, 0 to 6 m, got "61 m"',
    ),
}


@pytest.mark.parametrize("text, message", BAD.values(), ids=BAD.keys())
def test_fault(text, message):
    assert only_fault(text).startswith(message)


def test_all_faults_come_in_one_go_in_order_of_lines():
    text = (
        'lenght = "6 m"\n'
        + STEEL.replace("210 GPa", "210 kN")
        + BEAM.replace("100 mm", "100")
        + plate('under = "bean"')
        + '[[load]]\nkind = "point"\nvalue = "5 kg"\nat = "1 m"\n[[limit]]\nname = "a"\ncombination = "x"\n'
    )
    got = faults_of(text)
    lines = [int(fault.split(":")[1]) for fault in got]
    assert lines == [1, 3, 9, 17, 20, 22, 24]


def test_a_sound_part_is_checked_beside_a_faulty_top_level():
    got = faults_of('datum = "botom"\n' + BASE + 'to = "9 m"\n')
    assert len(got) == 2
    assert got[1].startswith(':12: part "beam", to')


def test_a_fault_is_not_told_twice():
    # a host that cannot be read is no reason to complain about what stands on it
    got = faults_of(BASE.replace("200 mm", "0 mm") + plate('under = "beam"'))
    assert len(got) == 1


@pytest.mark.parametrize(
    ("content", "message"),
    [
        (b"\x00\x01\x02", "the file is binary, not a text"),
        (b"\xff\xfea\x00", "UTF-16"),
        (b'length = "6 m', "never closed"),
        (b'length = 6 m"', "quantities and words stand in quotes"),
    ],
)
def test_not_a_job_at_all(tmp_path, content, message):
    path = tmp_path / "j.toml"
    path.write_bytes(content)
    with pytest.raises(JobFaults, match=message):
        read_job(str(path))


def test_no_such_file(tmp_path):
    with pytest.raises(JobFaults, match="there is no such file"):
        read_job(str(tmp_path / "none.toml"))
    with pytest.raises(JobFaults, match="a folder, not a file"):
        read_job(str(tmp_path))


SURVEY = {
    "no file": (None, 'j.toml:10: part "beam", depth.file: "s.csv": no such file beside the job'),
    "empty": ("# only a remark\n", 'j.toml:10: part "beam", depth.file: "s.csv" is empty'),
    "header only": (
        "x [m],d [mm]\n",
        's.csv: part "beam", depth, file: expected at least two rows below the header, got 0',
    ),
    "no column": (
        "x [m],e [mm]\n0,1\n6,2\n",
        'j.toml:10: part "beam", depth.value: no column "d" in s.csv; known are "x" and "e"',
    ),
    "near column": (
        "xx [m],d [mm]\n0,1\n6,2\n",
        'j.toml:10: part "beam", depth.x: no column "x" in s.csv; did you mean "xx"?',
    ),
    "no unit": (
        "x [m],d\n0,1\n6,2\n",
        's.csv:1: value: expected a unit of a length such as "mm", got "d" without one',
    ),
    "wrong unit": (
        "x [m],d [kN]\n0,1\n6,2\n",
        's.csv:1: value: expected a unit of a length such as "mm", got "kN", which is a force',
    ),
    "a word": (
        "x [m],d [mm]\n0,1\n\n6,thin\n",
        's.csv:4: d [mm]: expected a number of 0 or more, got "thin"',
    ),
    "a gap": (
        "x [m],d [mm]\n0,1\n6,\n",
        "s.csv:3: d [mm]: expected a number of 0 or more, got an empty cell",
    ),
    "nan": ("x [m],d [mm]\n0,nan\n6,1\n", 's.csv:2: d [mm]: expected a number of 0 or more, got "nan"'),
    "negative": ("x [m],d [mm]\n0,1\n6,-1\n", 's.csv:3: d [mm]: expected a number of 0 or more, got "-1"'),
    "repeated": (
        "x [m],d [mm]\n0,1\n0,1\n6,1\n",
        "s.csv:3: expected each station once, got the station at 0 m again",
    ),
    "back": (
        "x [m],d [mm]\n0,1\n3,1\n2,1\n6,2\n",
        "s.csv:4: expected stations in order of x, got 2 m after 3 m",
    ),
}


@pytest.mark.parametrize("content, message", SURVEY.values(), ids=SURVEY.keys())
def test_survey_file(tmp_path, monkeypatch, content, message):
    monkeypatch.chdir(tmp_path)
    if content is not None:
        (tmp_path / "s.csv").write_text(content)
    (tmp_path / "j.toml").write_text(BASE.replace('"200 mm"', '{ file = "s.csv", x = "x", value = "d" }'))
    with pytest.raises(JobFaults) as caught:
        read_job("j.toml")
    assert [str(f) for f in caught.value.faults] == [message]
