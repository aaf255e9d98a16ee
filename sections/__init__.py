"""One cross-section: outlines, composition, stiffness, stress."""
