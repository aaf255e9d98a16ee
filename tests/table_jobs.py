"""Jobs whose tables are looked at, and how to find a block or a row in a table."""

import re

from fishbelly.cli.job_file import read_job
from fishbelly.cli.text_table import shown_width
from fishbelly.member.results import deflect

WIDTH = 80
LONG = "upper cover plate of the northern approach span, west girder"

STEEL = '[material.steel]\nE = "210 GPa"\nG = "81 GPa"\ndensity = "7850 kg/m3"\n'
BEAM = (
    STEEL
    + '[[part]]\nname = "beam"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "100 mm"\ndepth = "200 mm"\n'
    + '[[support]]\nat = "0 m"\nkind = "pin"\nname = "A"\n[[support]]\nat = "6 m"\nkind = "roller"\nname = "B"\n'
)
UNIFORM = '[[load]]\nkind = "uniform"\nvalue = "10 kN/m"\n'
FOUND = 5 * 1e4 * 6.0**4 / (384 * 210e9 * 0.1 * 0.2**3 / 12) + 1e4 * 6.0**2 / (8 * 81e9 * 0.02 * 5 / 6)
"""Bending and shear deflection of the beam in closed form [m]: 12.09 mm."""


def solved(text, at=None):
    job = read_job("-", text)
    data = deflect(job.member, at)
    data["notes"] = [str(n) for n in data["notes"]]
    return job, data


def simple(extra="", head=""):
    return f'title = "Beam"\nlength = "6 m"\n{head}' + BEAM + UNIFORM + extra


def limit(allowed):
    return f'[[limit]]\nname = "given"\nabsolute = "{allowed} m"\n'


def block(text, heading):
    """Lines of a table, from its heads on."""
    lines = text.splitlines()
    start = next(k for k, line in enumerate(lines) if line.startswith(heading))
    start = next(k for k in range(start, len(lines)) if lines[k].startswith("  "))
    stop = next(k for k in range(start, len(lines)) if not lines[k])
    return lines[start:stop]


def station_rows(text):
    """Split the lines that begin with a place, numbers without blanks between thousands."""
    lines = [line for line in text.splitlines() if re.match(r" +\d\.\d{3} ", line)]
    return [re.sub(r"(?<=\d) (?=\d{3})", "", line).split() for line in lines]


def widest(text):
    return max(map(shown_width, text.splitlines()))


def many_spans(units):
    text = f'title = "{LONG * 2}"\nlength = "72 m"\nunits = "{units}"\n{STEEL}'
    text += f'[[part]]\nname = "{LONG} 0"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "100 mm"\ndepth = "0.3 m"\n'
    for k in range(1, 30):
        text += f'[[part]]\nname = "{LONG} {k}"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "50 mm"\n'
        text += f'depth = "{5 + k} mm"\nunder = "{LONG} 0"\n'
        text += f'from = "{2.4 * k - 1.234:.3f} m"\nto = "{2.4 * k + 0.3:.3f} m"\n'
    for k in range(13):
        kind = "pin" if k == 0 else "roller"
        text += (
            f'[[support]]\nat = "{6 * k} m"\nkind = "{kind}"\nname = "pier number {k} with a name that is long too"\n'
        )
    text += UNIFORM + '[[load]]\nkind = "uniform"\nvalue = "1 kN/m"\ndirection = "across"\n'
    text += '[[load]]\nkind = "axial"\nvalue = "30 kN"\nat = "15 m"\n'
    return (
        text + f'[[limit]]\nname = "{LONG}, deflection"\nspan_over = 300\n[[station]]\nat = "33.3 m"\nname = "seal"\n'
    )
