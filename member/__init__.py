"""The member along x: description, profile, response, checks."""
