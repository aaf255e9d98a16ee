"""A job file to the frozen description of a member, or every fault of it in one go."""

from __future__ import annotations

import sys
from collections.abc import Sequence
from dataclasses import dataclass, replace
from pathlib import Path as FilePath
from typing import Any

from fishbelly.cli.faults import Fault, JobFaults
from fishbelly.cli.job_catalogue import read_catalogue
from fishbelly.cli.job_cuts import read_haunches, read_notches, read_openings
from fishbelly.cli.job_limits import read_limits
from fishbelly.cli.job_loads import read_loads
from fishbelly.cli.job_materials import read_materials
from fishbelly.cli.job_models import NOT_BUILT, TABLES, JobTable
from fishbelly.cli.job_parts import read_part
from fishbelly.cli.job_questions import camber_of, read_combinations, read_stages, read_stations_by_name
from fishbelly.cli.job_references import given_names, references
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_supports import read_hinges, read_supports
from fishbelly.cli.job_tables import keys_of, list_of_tables, read_table
from fishbelly.cli.toml_lines import load_toml
from fishbelly.member.checking import problems
from fishbelly.member.description import Member, Part
from fishbelly.member.draft import Draft, Problem


@dataclass(frozen=True, eq=False)
class Job:
    """A job that has been read.

    Parameters
    ----------
    member : Member
        What the job describes.
    style : {"metric", "us"}
        How results are shown.
    text : str
        The file as it stands.
    name : str
        Its name in messages.
    sizes : dict of str to str
        Designation of the parts that come from the catalogue, by the part's name.
    warnings : tuple of str
        What looks odd but is possible.
    """

    member: Member
    style: str
    text: str
    name: str
    sizes: dict[str, str]
    warnings: tuple[str, ...] = ()


def read_job(path: str, stdin_text: str | None = None) -> Job:
    """Read a job.

    Parameters
    ----------
    path : str
        The file; ``"-"`` for standard input.
    stdin_text : str, optional
        What stands on standard input, where it has been read already.

    Returns
    -------
    Job
        The description, in SI units, checked.

    Raises
    ------
    JobFaults
        With every fault of the file that can be told.
    """
    if path == "-":
        name, folder = "standard input", FilePath()
        content: str | bytes = sys.stdin.buffer.read() if stdin_text is None else stdin_text
    else:
        name, folder = path, FilePath(path).parent
        content = _content(path)
    data, lines = load_toml(content, name)
    text = content.decode("utf-8-sig") if isinstance(content, bytes) else content
    report = Report(name, data, lines, folder)
    return _job(report, text)


def _content(path: str) -> bytes:
    try:
        return FilePath(path).read_bytes()
    except FileNotFoundError:
        found = "there is no such file"
    except IsADirectoryError:
        found = "a folder, not a file"
    except (OSError, ValueError) as error:
        found = f"the file cannot be read: {getattr(error, 'strerror', None) or error}"
    raise JobFaults([Fault(path, None, "", "", "", found)])


def _job(report: Report, text: str) -> Job:
    report.data.update({kind: list_of_tables(kind, report) for kind in TABLES if kind in report.data})
    top = _top_level(report)
    length = None if top is None else top.length
    report.length = length
    report.catalogue = read_catalogue(report)
    materials, material_names = read_materials(report)
    sizes: dict[str, str] = {}
    parts: list[Part | None] = [
        read_part(i, top, material_names, sizes, report) for i in range(len(list_of_tables("part", report)))
    ]
    openings, opening_tables = read_openings(report)
    draft = Draft(
        length=length,
        parts=parts,
        materials=materials,
        notches=read_notches(length, report),
        haunches=read_haunches(length, report),
        openings=openings,
        supports=read_supports(length, report),
        hinges=read_hinges(length, report),
        loads=read_loads(length, parts, report),
        stages=read_stages(report),
        combinations=read_combinations(report),
        limits=read_limits(report),
        stations=read_stations_by_name(length, report),
        names=given_names(report.data, material_names),
        references=references(report.data),
        rises=0.0 if top is None else top.rises,
        shear=top is not None and top.shear,
        camber=None if top is None else camber_of(top),
    )
    report.problems(_placed(problems(draft), opening_tables))
    if report.faults:
        raise JobFaults(_without_repeats(report.faults))
    assert top is not None
    return Job(_member(draft, top), top.units, text, report.name, sizes, tuple(report.warnings))


def _top_level(report: Report) -> JobTable | None:
    """Read the keys of the top level, and note tables that are unknown or not built."""
    known = {*TABLES, "material", "catalog"}
    for key in report.data:
        if key in NOT_BUILT[""] and key not in keys_of(JobTable):
            shown = f"[[{key}]]" if isinstance(report.data[key], list) else f'key "{key}"'
            report.place(report.line((key,)), "", f"{shown}: not built yet in this version", "", (key,))
    rest = {k: v for k, v in report.data.items() if k not in known and k not in NOT_BUILT[""]}
    tables = [key for key, value in rest.items() if isinstance(value, list | dict) and key not in keys_of(JobTable)]
    for key in tables:
        _unknown_table(key, report)
    top = read_table(JobTable, {k: v for k, v in rest.items() if k not in tables}, (), report)
    if top is None and "length" in rest and not report.faulty(("length",)):
        # the rest of the job can be checked all the same; what needs G is left alone
        top = JobTable(length=rest["length"], shear=False)
    return top


def _unknown_table(key: str, report: Report) -> None:
    from fishbelly.cli.faults import suggest

    hint = suggest(key, (*TABLES, "material", "catalog", *keys_of(JobTable)))
    report.place(report.line((key,)), "", f'unknown table "{key}"', hint, (key,))


def _placed(found: Sequence[Problem], opening_tables: Sequence[int]) -> list[Problem]:
    """Give the problems of openings the numbers of their tables."""
    result = []
    for problem in found:
        path = problem.path
        if path[0] == "opening" and len(path) > 1:
            path = ("opening", opening_tables[int(path[1])], *path[2:])
        result.append(replace(problem, path=path))
    return result


def _without_repeats(faults: Sequence[Fault]) -> list[Fault]:
    return list(dict.fromkeys(faults))


def _known(items: Sequence[Any]) -> tuple[Any, ...]:
    assert all(item is not None for item in items)
    return tuple(items)


def _member(draft: Draft, top: JobTable) -> Member:
    return Member(
        length=top.length,
        parts=_known(draft.parts),
        materials=tuple(draft.materials),
        notches=_known(draft.notches),
        haunches=_known(draft.haunches),
        openings=_known(draft.openings),
        supports=_known(draft.supports),
        hinges=_known(draft.hinges),
        loads=_known(draft.loads),
        stages=_known(draft.stages),
        combinations=_known(draft.combinations),
        limits=_known(draft.limits),
        stations=_known(draft.stations),
        rises=draft.rises,
        shear=draft.shear,
        camber=draft.camber,
        title=top.title,
        note=top.note,
        inclined=top.inclined,
        tension_stiffening=top.tension_stiffening,
        cracks=top.cracks,
    )
