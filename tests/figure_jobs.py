"""Jobs that are hard to draw: thin, long, crowded, wordy."""

from __future__ import annotations

_STEEL = """
[material.steel]
like = "S275"
strength = "165 MPa"
"""


def _table(table: str, /, **keys: object) -> str:
    def shown(value: object) -> str:
        if isinstance(value, bool):
            return "true" if value else "false"
        if isinstance(value, str) and not value.startswith(("[", "{")):
            return f'"{value}"'
        return str(value)

    return f"[[{table}]]\n" + "".join(f"{k.rstrip('_')} = {shown(v)}\n" for k, v in keys.items())


def _supports(*places: str) -> str:
    return "".join(
        _table("support", at=x, kind="pin" if k == 0 else "roller", name=chr(65 + k) if k < 26 else f"A{k}")
        for k, x in enumerate(places)
    )


PLATED = f"""
title = "Beam over the loading door"
length = "6 m"
{_STEEL}
{_table("part", name="beam", size="IPE 300", material="steel")}
{_table("part", name="plate", shape="rectangle", width="120 mm", depth="12 mm", material="steel", under="beam", **{"from": "1.5 m", "to": "4.5 m"})}
{_supports("0 m", "6 m")}
{_table("load", kind="self weight", case="dead")}
{_table("load", kind="uniform", value="14 kN/m", case="floor")}
{_table("load", kind="point", value="22 kN", at="2 m", case="floor")}
{_table("load", kind="couple", value="8 kNm", at="4.2 m", case="floor")}
[[combination]]
name = "floor alone"
factors = {{ floor = 1.0 }}
[[combination]]
name = "total"
factors = {{ dead = 1.0, floor = 1.0 }}
{_table("limit", name="L/360", span_over=360, combination="floor alone")}
"""

HAUNCHED = f"""
title = "Bridge of two spans with haunches over the pier"
length = "30 m"
{_table("part", name="girder", shape="I", depth="900 mm", width="300 mm", web="12 mm", flange="25 mm", material="S355")}
{_table("part", name="slab", shape="rectangle", width="2400 mm", depth="200 mm", material="C30/37", over="girder")}
{_table("part", name="soffit plate", shape="rectangle", width="350 mm", depth="30 mm", material="S355", under="girder", **{"from": "11 m", "to": "19 m"})}
{_table("haunch", of="girder", at="15 m", depth="700 mm", reach="4 m", law="parabola")}
{_supports("0 m", "15 m", "30 m")}
{_table("load", kind="self weight", case="dead")}
{_table("load", kind="uniform", value="40 kN/m", case="traffic", pattern=True)}
{_table("load", kind="varying", stations='[["15 m", "0 kN/m"], ["22 m", "12 kN/m"], ["30 m", "3 kN/m"]]', case="snow drift")}
{_table("load", kind="temperature", top="15 K", bottom="0 K", case="sun")}
"""

SHAFT = """
title = "Pump shaft with steps"
length = "420 mm"
datum = "middle"
[material.steel]
E = "200 GPa"
poisson = 0.3
density = "7850 kg/m3"
[[part]]
name = "shaft"
shape = "circle"
diameter = { steps = [["60 mm", "45 mm"], ["200 mm", "55 mm"], ["260 mm", "50 mm"], ["330 mm", "42 mm"], ["420 mm", "34 mm"]] }
material = "steel"
[[support]]
name = "bearing A"
at = "30 mm"
kind = "pin"
[[support]]
name = "bearing B"
at = "230 mm"
kind = "spring"
vertical = "200 kN/mm"
[[station]]
name = "seal"
at = "300 mm"
[[station]]
name = "impeller"
at = "395 mm"
[[load]]
kind = "point"
value = "1150 N"
at = "395 mm"
case = "duty"
[[load]]
kind = "axial"
value = "2 kN"
at = "395 mm"
case = "duty"
[[limit]]
name = "seal"
absolute = "0.05 mm"
at = "seal"
"""

FLITCH = f"""
title = "Flitch beam"
length = "4800 mm"
[material.softwood]
like = "C24"
creep = 0.6
[material.S275]
like = "S275"
creep = 0.0
{_table("part", name="plate", shape="rectangle", width="10 mm", depth="200 mm", material="S275", **{"from": "150 mm", "to": "4650 mm"}, position='["0 mm", "0 mm"]')}
{_table("part", name="timber", shape="rectangle", width="75 mm", depth="225 mm", material="softwood", position='["42.5 mm", "0 mm"]', pair=True)}
{_supports("0 m", "4800 mm")}
{_table("load", kind="uniform", value="3 kN/m", case="dead")}
{_table("load", kind="uniform", value="4 kN/m", case="imposed")}
[[combination]]
name = "final"
factors = {{ dead = 1.0, imposed = 1.0 }}
sustained = {{ dead = 1.0, imposed = 0.3 }}
"""

US_ARM = """
title = "Tapered sign arm"
length = "18 ft"
units = "us"
[material.steel]
E = "29000 ksi"
poisson = 0.3
density = "490 lb/ft3"
[[part]]
name = "tube"
shape = "tube"
diameter = [["0 ft", "10 in"], ["18 ft", "5 in"]]
wall = "0.239 in"
material = "steel"
[[support]]
at = "0 ft"
kind = "fixed"
name = "post"
[[station]]
name = "sign"
at = "15 ft"
[[load]]
kind = "self weight"
[[load]]
kind = "point"
value = "260 lb"
at = "15 ft"
case = "sign"
[[load]]
kind = "point"
value = "90 lb"
at = "15 ft"
case = "ice"
[[load]]
kind = "point"
value = "900 lb"
at = "15 ft"
direction = "across"
case = "wind"
[[limit]]
name = "tip"
span_over = 180
"""

HOLED = f"""
title = "I-section with a service hole and notches"
length = "5 m"
{_table("part", name="beam", shape="I", depth="400 mm", width="180 mm", web="8.6 mm", flange="13.5 mm", material="S275")}
{_table("part", name="joist beside", shape="rectangle", width="60 mm", depth="200 mm", material="C24", right_of="beam", **{"from": "3.4 m"})}
{_table("opening", at="2 m", diameter="220 mm", of="beam")}
{_table("opening", at="3 m", length="400 mm", depth="180 mm", radius="20 mm", of="beam")}
{_table("notch", of="beam", side="top", depth="60 mm", **{"from": "0 m", "to": "0.4 m"})}
{_table("notch", of="beam", side="bottom", depth='[["4.5 m", "0 mm"], ["5 m", "90 mm"]]', **{"from": "4.5 m", "to": "5 m"})}
{_supports("0 m", "5 m")}
{_table("load", kind="uniform", value="10 kN/m", **{"from": "0.5 m", "to": "3 m"})}
{_table("load", kind="point", value="9 kN", at="4 m", direction="up")}
"""


def _twelve_spans() -> str:
    places = [f"{5 * k} m" for k in range(13)]
    points = "".join(_table("load", kind="point", value=f"{20 + k} kN", at=f"{1.25 + 1.9 * k} m", case="lorries") for k in range(30))
    return f"""
title = "Viaduct"
length = "60 m"
{_table("part", name="deck", shape="box", width="2 m", depth="700 mm", wall="25 mm", material="S355")}
{_supports(*places)}
{_table("load", kind="self weight")}
{_table("load", kind="uniform", value="60 kN/m", case="lane", pattern=True)}
{points}
{_table("hinge", at="22 m")}
{_table("hinge", at="38 m")}
"""


def _thirty_parts() -> str:
    parts = _table("part", name="web plate", shape="rectangle", width="20 mm", depth="600 mm", material="S275")
    for k in range(29):
        host, way = ("web plate", "under") if k == 0 else (f"plate {k}", "under")
        parts += _table(
            "part",
            name=f"plate {k + 1}",
            shape="rectangle",
            width=f"{300 - 5 * k} mm",
            depth="8 mm",
            material=("S275", "S355", "6061-T6")[k % 3],
            **{way: host, "from": f"{0.1 * k:.1f} m", "to": f"{8 - 0.1 * k:.1f} m"},
        )
    return f"""
title = "Thirty parts"
length = "8 m"
{parts}
{_supports("0 m", "8 m")}
{_table("load", kind="uniform", value="30 kN/m")}
"""


FOIL = f"""
title = "Foil"
length = "120 mm"
{_table("part", name="foil", shape="rectangle", width="20 mm", depth="0.3 mm", material="S275")}
{_supports("0 mm", "120 mm")}
{_table("load", kind="point", value="0.2 N", at="40 mm")}
"""

_LONG = "north-east gable girder, re-used, with the 1962 repair plates"

WORDY = f"""
title = "{_LONG}, seen by {_LONG}, checked by {_LONG}"
length = "7 m"
[material."{_LONG} steel"]
like = "S275"
{_table("part", name=_LONG + " A", size="IPE 300", material=_LONG + " steel")}
{_table("part", name=_LONG + " B", shape="rectangle", width="120 mm", depth="0.3 mm", material="S355", over=_LONG + " A")}
{_table("part", name="$x_{1}$ & <b>", shape="rectangle", width="120 mm", depth="10 mm", material="C24", under=_LONG + " A")}
{_table("support", name=_LONG + " A", at="0 m", kind="pin")}
{_table("support", name=_LONG + " B", at="6 m", kind="roller", only="up", sinks="4 mm")}
{_table("station", name=_LONG + " 1", at="3 m")}
{_table("station", name=_LONG + " 2", at="3.05 m")}
{_table("load", kind="uniform", value="3.3 kN/m", case=_LONG)}
{_table("load", kind="prestress", part="$x_{1}$ & <b>", force="5 kN", case=_LONG)}
{_table("load", kind="shrinkage", part="$x_{1}$ & <b>", strain=0.0001, case="dry")}
"""

GUIDED = f"""
title = "One station, guide and turning spring"
length = "2 m"
{_table("part", name="bar", shape="rectangle", width="20 mm", depth="40 mm", material="S275")}
{_table("support", name="wall", at="0 m", kind="fixed")}
{_table("support", name="guide", at="2 m", holds='["rotation"]')}
{_table("support", name="stop", at="1.2 m", kind="spring", vertical="1 kN/mm", rotation="4 kNm/rad")}
{_table("station", name="camera", at="1.6 m")}
{_table("load", kind="point", value="1 kN", at="2 m")}
"""

JOBS = {
    "plated": PLATED,
    "haunched": HAUNCHED,
    "shaft": SHAFT,
    "flitch": FLITCH,
    "us arm": US_ARM,
    "holed": HOLED,
    "twelve spans": _twelve_spans(),
    "thirty parts": _thirty_parts(),
    "foil": FOIL,
    "wordy": WORDY,
    "guided": GUIDED,
}
"""Job files by name."""
