"""What results do not cover, said on every output in one line and in full on request."""

from __future__ import annotations

LINE = "A calculation aid, not a design: see `fishbelly --cautions`."
"""The short caution under every table."""

FULL = """\
Cautions

A calculation aid for a competent person, licensed where the law asks for it.
Local codes, national annexes and the owner's requirements come first.

Not checked, unless a result says so: lateral-torsional and local buckling,
bearing of webs, connections, anchorage, fatigue, fire, comfort under vibration,
robustness, foundations, ductility in earthquakes.

Parts that are placed together act together fully: that is an assumption of the
job file, and the fixings between them have to make it true.

Existing structures: verify sizes, grades and condition on site. A sag that is
measured there is not all elastic.

Welding, cutting, propping and jacking members under load need a design and a
sequence of their own.

The stiffness of timber and concrete varies by tens of per cent. A utilisation
between 0.9 and 1.1 is a call for judgement, whichever side of 1 it is on.

Openings, notches and the ends of plates disturb stresses near them in ways
that beam theory does not see."""
"""The cautions in full, for `fishbelly --cautions`; lines of at most 80 characters."""
