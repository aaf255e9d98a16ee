"""A job around a few lines of text, read."""

from fishbelly.cli.job_file import read_job

STEEL = """
[material.steel]
E = "210 GPa"
poisson = 0.3
density = "7850 kg/m3"
expansion = "12e-6 /K"
creep = 0.0
"""
BEAM = '\n[[part]]\nname = "beam"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "100 mm"\ndepth = "200 mm"\n'


def job(text, head='length = "6 m"\n', materials=STEEL):
    return read_job("-", head + materials + text)


def member(text, **kwargs):
    return job(text, **kwargs).member


def part(dimensions, **kwargs):
    return member(f'\n[[part]]\nname = "a"\nmaterial = "steel"\n{dimensions}\n', **kwargs).parts[0]


def dims(dimensions):
    return {k: v.value for k, v in part(dimensions).shape.dimensions.items()}
