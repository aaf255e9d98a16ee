"""Which outlines of a section touch or overlap, directly or through others."""

from __future__ import annotations

from collections.abc import Sequence

import numpy as np

from fishbelly.sections.outlines import Outline, arcs


def touching_groups(outlines: Sequence[Outline], station: int) -> list[list[int]]:
    """Group outlines that hang together at one station.

    Parameters
    ----------
    outlines : sequence of Outline
        Outlines at S stations.
    station : int
        Which station.

    Returns
    -------
    list of list of int
        Indices of the outlines of each group; copies of a pair count as one outline.
    """
    shapes = [_polygons(o, station) for o in outlines]
    size = max(float(np.ptp(o.z[station]) + np.ptp(o.y[station])) for o in outlines)
    groups: list[list[int]] = []
    for k, shape in enumerate(shapes):
        meets = [g for g in groups if any(shape.distance(shapes[j]) <= 1e-6 * size for j in g)]
        groups = [g for g in groups if g not in meets] + [[*(j for g in meets for j in g), k]]
    return groups


def _polygons(outline: Outline, station: int):  # type: ignore[no-untyped-def]
    """Shapely geometry of an outline at one station; arcs by chords of a degree or two."""
    import shapely

    rings = []
    _ends_y, _ends_z = outline.ends
    for first, stop in outline.loops:
        points = []
        for e in range(first, stop):
            points.append((outline.y[station, e], outline.z[station, e]))
            if outline.bulge[e]:
                y_c, z_c, r, start, turn = (float(v[station, 0]) for v in arcs(outline, np.array([e])))
                for t in np.linspace(0.0, 1.0, 25)[1:-1]:
                    points.append((y_c + r * np.cos(start + t * turn), z_c + r * np.sin(start + t * turn)))
        rings.append(shapely.Polygon(points))
    outer = [r for r in rings if shapely.is_ccw(r.exterior)]
    holes = [r for r in rings if not shapely.is_ccw(r.exterior)]
    whole = shapely.union_all(outer)
    return whole.difference(shapely.union_all(holes)) if holes else whole
