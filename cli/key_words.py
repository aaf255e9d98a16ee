"""What every key of a job means, in a line each: for the reference, the JSON Schema and the job with all keys."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass

from fishbelly.cli.job_load_models import LOADS
from fishbelly.cli.job_models import SINGLE, CatalogTable, JobTable, MaterialTable, Table
from fishbelly.cli.job_part_models import SHAPES, part_model

_PLACED = "name of an earlier part that this one stands"
LAW = "constant or a law along x"
"""Said of every dimension that may change along the member."""

KEYS: dict[str, dict[str, str]] = {
    "": {
        "title": "free text",
        "note": "free text",
        "length": "length of the member, from its left end",
        "units": "how results are shown: m, mm, kN, GPa or ft, in, kip, ksi",
        "datum": "which edge of the first part lies on the datum line y = 0, z = 0; default its top",
        "rises": "inclination, left end to right; down, up and along are then square to and along the member",
        "shear": "whether shear deformation counts; its share is shown apart",
        "inclined": "flanges and plates on a sloping outline: along their slope, or as a vertical cut shows them",
        "tension_stiffening": "rule for concrete between its cracks; default none: cracked sections alone",
        "cracks": "places stay cracked that any combination for deflection cracks, or each combination by itself",
        "camber": "height in the middle of each span, a parabola, or ordinates; upwards; used by limits with `net`",
    },
    "catalog": {"files": "csv, xlsx or toml files beside the job with sections and materials of your own"},
    "material": {
        "like": "name in the catalogue that gives what is not written here",
        "E": "modulus of elasticity along the member, short-term mean",
        "G": "shear modulus; or `poisson`",
        "poisson": "Poisson's ratio, gives G = E / (2 (1 + poisson)); not beside `G`",
        "density": "mass per volume, needed under self weight",
        "expansion": "coefficient of thermal expansion; a bare number is per K",
        "creep": "creep factor of loads of long duration, for timber k_def; or { rule, f_ck, humidity, size, "
        "loaded_at } for that of EN 1992-1-1, ages in days",
        "band": "lowest and highest E; results are given for both as well",
        "strength": "allowable stress, or { tension, compression, shear }: each part's worst fibre is a check",
        "yield": "stress above which an elastic result no longer holds; a note says where",
        "cracking": "tensile stress at which it cracks; written here, or with a key for cracks, it does; "
        "else a note alone",
        "no_tension": "true: it carries compression only, as masonry does",
    },
    "part": {
        "name": "unique name",
        "material": "a material of the job or of the catalogue; left out when `cut` is true",
        "size": "designation of the catalogue",
        "shape": "the outline; its dimensions follow",
        "from": "where it begins; default 0",
        "to": "where it ends; default the member's length",
        "run_in": "length at each end over which its E and G grow from nothing, its mass not; one, or [start, end]",
        "cut": "true: it takes material away instead of adding it",
        "of": "with `cut`: the part or parts that are cut; may be left out when there is one other part",
        "pair": "true: a second copy, mirrored about the vertical centre line of what it is placed against",
        "turn": "rotation about its own centroid before placing, anticlockwise seen from the far end",
        "mirror": "true: flipped left-right before turning",
        "under": f"{_PLACED} under, following its outline",
        "over": f"{_PLACED} on",
        "left_of": f"{_PLACED} to the left of",
        "right_of": f"{_PLACED} to the right of",
        "centred_on": f"{_PLACED} centred on",
        "position": f"[y, z] of its anchor, y to the right and z upwards; each {LAW}",
        "anchor": "point of its bounding box that `position` fixes; default the middle",
        "flush": "edges aligned: top, middle or bottom beside a part, left, middle or right under or over one",
        "gap": f"clear gap to the part it stands against, {LAW}",
        "shift": f"extra offset [y, z], each {LAW}",
        "stage": "first stage in which it works; default the first",
        "until": "stage at whose start it goes",
        "joined": "how it is fixed to the part it stands against: fasteners, with a stiffness where "
        "they slip, or a weld; default rigidly",
        "effective": "published rule by which only part of a slab's width counts in stiffness; its weight stays whole",
    },
    "dimension": {
        "width": f"full width, {LAW}",
        "depth": f"full depth, out to out, {LAW}",
        "diameter": f"outside diameter, {LAW}",
        "wall": f"wall thickness, {LAW}",
        "web": f"thickness of the web, {LAW}",
        "flange": f"thickness of the flanges, {LAW}",
        "radius": f"radius of the root fillets, {LAW}",
        "top_width": f"width at the top, {LAW}",
        "top_flange": f"thickness of the top flange, {LAW}",
        "bottom_width": f"width at the bottom, {LAW}",
        "bottom_flange": f"thickness of the bottom flange, {LAW}",
        "thickness": f"thickness of both legs, {LAW}",
        "toe_radius": f"radius of the toes, {LAW}",
    },
    "part box": {
        "wall": f"thickness all round, {LAW}; or `web` and `flange`",
        "web": f"thickness of the two sides, {LAW}",
        "flange": f"thickness of top and bottom, {LAW}",
        "radius": f"radius of the outer corners, {LAW}",
        "inner_radius": f"radius of the inner corners, {LAW}; default the outer one less the wall",
    },
    "part I": {
        "width": f"width of both flanges, {LAW}; or `top_width` and `bottom_width`",
        "flange": f"thickness of both flanges, {LAW}; or `top_flange` and `bottom_flange`",
        "top_width": f"width of the top flange, {LAW}",
        "bottom_width": f"width of the bottom flange, {LAW}",
    },
    "part tee": {"flange": f"thickness of the flange, at the top, {LAW}"},
    "part channel": {
        "flange": f"thickness of the flanges, at the back of the web where they taper, {LAW}",
        "slope": "slope of the inner faces of the flanges, a ratio; default parallel faces",
    },
    "part angle": {
        "depth": f"length of the upright leg, {LAW}",
        "width": f"length of the level leg, {LAW}",
        "web": f"thickness of the upright leg, {LAW}; with `flange` in place of `thickness`",
        "flange": f"thickness of the level leg, {LAW}",
    },
    "part regular polygon": {
        "sides": "number of sides",
        "across_flats": f"distance between opposite sides, {LAW}",
        "wall": f"wall thickness, {LAW}; default solid",
    },
    "part polygon": {
        "points": "corners [y, z], one after the other",
        "holes": "loops of corners [y, z] within the outline",
    },
    "part bars": {
        "count": "number of bars in the row",
        "diameter": f"diameter of a bar, {LAW}",
        "spacing": f"distance between the middles of neighbours, {LAW}; or `width`",
        "width": f"width of the row, out to out, {LAW}",
    },
    "notch": {
        "of": "the part that is cut, through its whole width",
        "side": "the side it is cut from",
        "depth": f"depth of the cut, {LAW}",
        "from": "where it begins",
        "to": "where it ends",
        "reach": "length to each side over which stiffness, not mass, is taken as cut too",
    },
    "haunch": {
        "of": "the part that grows deeper",
        "at": "x of the deepest point",
        "depth": "extra depth there",
        "reach": "length to each side over which it fades; one, or [left, right]",
        "law": "how it fades; a parabola is flat at its thin end",
        "side": "the side that grows",
    },
    "opening": {
        "at": "x of its middle, of the first in a row",
        "diameter": "of a round hole",
        "length": "of a rectangular hole, along x",
        "depth": "of a rectangular hole",
        "radius": "of a rectangular hole's corners",
        "level": 'z of its middle; "middle" of the first part it cuts',
        "of": "the part or parts it goes through; default all",
        "spacing": "distance between the middles of a row",
        "count": "how many in a row",
    },
    "support": {
        "at": "where it stands",
        "name": "name in results",
        "kind": "a pin or roller holds down and up, a fixed one also rotation, a spring what it has a stiffness for",
        "holds": "in place of `kind`: what it holds rigidly; down means down and up",
        "vertical": "stiffness of a spring, down and up",
        "rotation": "stiffness against rotation",
        "along": "along x only the leftmost pin or fixed support holds, unless others say so",
        "across": "sideways it holds what it holds vertically, unless this says otherwise",
        "level": "where on the section it holds along x: a word or a z",
        "sinks": "settlement, downwards; below zero it is jacked up",
        "case": "load case of the settlement",
        "only": '"up": a bearing that cannot pull',
        "slip": '"free": where it holds the rotation, layers joined by fasteners that slip may slip there all the same',
        "stage": "first stage in which it holds; default the first",
        "until": "stage at whose start it is taken away",
    },
    "hinge": {
        "at": "where the member is free to turn",
        "name": "name in messages",
        "stage": "first stage in which it is open; default the first",
        "until": "stage at whose start it closes",
    },
    "station": {"name": "name of a place whose results are wanted", "at": "where it is"},
    "stage": {
        "name": "unique name; stages stand in order of time",
        "cases": "load cases that arrive in it; with stages every case belongs to one of them",
        "long_term": "true: loads that arrive in it act with every E, G and joint stiffness over 1 + creep",
        "moduli": "modulus of a material in this stage, or a factor of its own",
        "creep": "creep factor that runs off in this stage under the stress locked in, by material",
        "ageing": "ageing coefficient of the age-adjusted modulus E/(1 + ageing creep)",
    },
    "combination": {
        "name": "unique name",
        "factors": "factor of each load case; a case not named has factor 0",
        "sustained": "share of each factor that acts with long-term moduli",
        "for": "limits look only at combinations for deflection, strength at those for strength where there are any",
    },
    "limit": {
        "name": "name in the checks",
        "like": "name of a published limit of the catalogue that gives what is not written here",
        "span_over": "allowed is the span over this number; twice the length of a cantilever counts",
        "absolute": "allowed deflection",
        "slope": "allowed rotation of the section",
        "at": "a named station, in place of the spans",
        "of": "which deflection; resultant: down and across together",
        "net": "true: the job's camber is subtracted",
        "combination": "look only at this one; default every one for deflection",
        "from": "look only beyond this place",
        "to": "look only up to this place",
        "span": 'look only at these spans, numbered from the left; overhangs are "left" and "right"',
        "cantilever_over": "of an overhang: allowed is its own length over this number",
        "after": "only what happens from the start of this stage on",
        "stage": "at the end of this stage; default the last",
    },
    "load": {
        "kind": "what it is; its keys follow",
        "case": "its load case",
        "from": "where it begins; default 0",
        "to": "where it ends; default the member's length",
        "at": "where it acts",
        "direction": "down, up or across (towards +y)",
        "per": "on an inclined member: vertical, per plan length or per length along it; default square to it",
        "pattern": "true: on or off span by span, results are envelopes",
        "spacing": "width that a load per area is taken from",
    },
    "load self weight": {
        "factor": "multiplies it",
        "parts": "weigh these parts only; default all",
    },
    "load uniform": {"value": "load per length, or per area with `spacing`"},
    "load varying": {"stations": "[[x, value], …] straight between, nothing outside; the same x twice is a step"},
    "load point": {"value": "the force"},
    "load couple": {"value": "the couple, clockwise in the elevation"},
    "load axial": {
        "value": "the force, towards +x",
        "level": "where on the section it acts: a word or a z",
    },
    "load temperature": {
        "top": "rise at the section's top, with `bottom`; straight between",
        "bottom": "rise at the section's bottom",
        "parts": "in place of `top` and `bottom`: rise of each part named",
    },
    "load shrinkage": {
        "part": "the part that shrinks",
        "strain": "shortening, positive",
        "creep": "creep factor of the sustained share; default the material's",
        "from": "where it begins; default where the part does",
        "to": "where it ends; default where the part does",
    },
    "load prestress": {
        "part": "the part that is tensioned",
        "force": "tension in it as it is fixed, before the rest shortens; or `strain`",
        "strain": "strain in it as it is fixed",
    },
}
"""Meaning of keys by table; "part SHAPE" and "load KIND" stand before "part", "dimension" and "load"."""


@dataclass(frozen=True)
class JobTableKind:
    """A kind of table that a job may have: its table, what tells it from others of that table, and its model."""

    table: str
    kind: str
    model: type[Table]


def job_tables() -> Iterator[JobTableKind]:
    """Yield every table of a job with its model, in the order of a job; the top level has the name ""."""
    yield JobTableKind("", "", JobTable)
    yield JobTableKind("catalog", "", CatalogTable)
    yield JobTableKind("material", "", MaterialTable)
    yield JobTableKind("part", "size", part_model(None))
    yield from (JobTableKind("part", shape, part_model(shape)) for shape in SHAPES)
    yield from (JobTableKind(name, "", model) for name, model in SINGLE.items())
    yield from (JobTableKind("load", kind, model) for kind, model in LOADS.items())


def key_words(table: str, key: str, kind: str = "") -> str:
    """Say what a key means.

    Parameters
    ----------
    table : str
        Its table; "" for the top level.
    key : str
        The key, as the job writes it.
    kind : str
        Shape of a part, kind of a load.

    Raises
    ------
    KeyError
        When nobody has said it.
    """
    places = [f"{table} {kind}", table, *(["dimension"] if table == "part" else [])]
    for place in places:
        if key in KEYS.get(place, {}):
            return KEYS[place][key]
    raise KeyError(f"{table or 'top level'} {kind}: {key}")
