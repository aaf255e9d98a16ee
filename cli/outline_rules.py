"""Which dimensions of an outline may share one key, and which are nothing where they are not given."""

RADII = {
    "box": ("radius",),
    "I": ("radius",),
    "tee": ("radius",),
    "channel": ("radius", "toe_radius", "slope", "flange_at"),
    "angle": ("radius", "toe_radius"),
    "regular polygon": ("wall",),
}
"""Dimensions that are nothing where they are not given."""

SHARED = {
    "box": {"web": "wall", "flange": "wall"},
    "angle": {"web": "thickness", "flange": "thickness"},
    "I": {
        "top_width": "width",
        "bottom_width": "width",
        "top_flange": "flange",
        "bottom_flange": "flange",
    },
}
"""Dimensions that share one key where they do not have their own."""
