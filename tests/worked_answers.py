"""Answers of the worked jobs, each number computed a second time in a few lines that use nothing of the package.

A function takes the text of its job and gives what the `# Expected:` comment states, in its order or not: the value
in the unit stated, and the figure with its unit as printed. Where the tool's value and the second one differ by more
than 1e-8 of it, the function fails.
"""

from collections.abc import Callable

from worked_cracked import bonded_plate, cracked_beam
from worked_members import (
    cambered_girder,
    continuous_beam,
    gantry_arm,
    inclined_rafter,
    propped_cantilever,
    runway_beam,
)
from worked_run import Values
from worked_sections import beam_with_openings, concrete_beam, corroded_lintel, plated_w_shape, z_purlin
from worked_shear import flitch_beam, plated_beam, pump_shaft, tapered_arm
from worked_slip import footbridge
from worked_stages import flitch_in_two_stages, jacked_and_plated, plated_under_load

ANSWERS: dict[str, Callable[[str], Values]] = {
    "beam-with-openings": beam_with_openings,
    "bonded-plate": bonded_plate,
    "cambered-girder": cambered_girder,
    "concrete-beam": concrete_beam,
    "continuous-beam": continuous_beam,
    "corroded-lintel": corroded_lintel,
    "cracked-beam": cracked_beam,
    "flitch-beam": flitch_beam,
    "flitch-in-two-stages": flitch_in_two_stages,
    "footbridge": footbridge,
    "gantry-arm": gantry_arm,
    "inclined-rafter": inclined_rafter,
    "jacked-and-plated": jacked_and_plated,
    "plated-beam": plated_beam,
    "plated-under-load": plated_under_load,
    "plated-w-shape": plated_w_shape,
    "propped-cantilever": propped_cantilever,
    "pump-shaft": pump_shaft,
    "runway-beam": runway_beam,
    "tapered-arm": tapered_arm,
    "z-purlin": z_purlin,
}
