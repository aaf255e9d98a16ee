"""Every fault of supports, loads, combinations and limits of a job is told, and what is missing."""

# ruff: noqa: E501 (a job and its message stand side by side, unbroken, as they are written)

import pytest
from bad_jobs import BASE, PINS, only_fault

BAD = {
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
