"""A sound job to spoil, and the faults that are told of a text."""

# ruff: noqa: E501 (a job and its message stand side by side, unbroken, as they are written)

import pytest

from fishbelly.cli.faults import JobFaults
from fishbelly.cli.job_file import read_job

HEAD = 'length = "6 m"\n'
STEEL = '[material.steel]\nE = "210 GPa"\npoisson = 0.3\n'
BEAM = '[[part]]\nname = "beam"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "100 mm"\ndepth = "200 mm"\n'
BASE = HEAD + STEEL + BEAM
PINS = '[[support]]\nat = "0 m"\nkind = "pin"\n[[support]]\nat = "6 m"\nkind = "roller"\n'


def plate(lines, name="plate"):
    return f'[[part]]\nname = "{name}"\nmaterial = "steel"\nshape = "rectangle"\nwidth = "50 mm"\ndepth = "10 mm"\n{lines}\n'


def faults_of(text):
    with pytest.raises(JobFaults) as caught:
        read_job("-", text)
    return [str(fault).removeprefix("standard input") for fault in caught.value.faults]


def only_fault(text):
    faults = faults_of(text)
    assert len(faults) == 1, faults
    return faults[0]


def shape(text):
    return HEAD + STEEL + f'[[part]]\nname = "a"\nmaterial = "steel"\n{text}\n'
