"""Figures into files: PNG, SVG and PDF, the same bytes for the same job."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from io import BytesIO
from pathlib import Path
from typing import Any

FORMATS = (".png", ".svg", ".pdf")
"""Suffixes that are written."""
COMMANDS = ("section", "stiffness", "deflect")
"""Commands whose results are drawn."""


def write_figure(path: str, command: str, data: Mapping[str, Any], job: Any, analysis: Any = None) -> None:
    """Draw the results of a command and write them to a file.

    Parameters
    ----------
    path : str
        The file; its suffix says the format. It is overwritten; nothing is written where drawing fails.
    command : {"section", "stiffness", "deflect"}
        Whose results they are.
    data : mapping
        The results, SI units.
    job : Job
        The job: its member and its style of units.
    analysis : Analysis, optional
        The solved member, where the caller has it already.

    Raises
    ------
    ValueError
        When the suffix or the command is not one of `FORMATS` and `COMMANDS`.
    OSError
        When the file cannot be written.
    """
    content = figure_bytes(Path(path).suffix, command, data, job, analysis)
    Path(path).write_bytes(content)


def figure_bytes(suffix: str, command: str, data: Mapping[str, Any], job: Any, analysis: Any = None) -> bytes:
    """Draw the results of a command.

    A picture (PNG, SVG) of `deflect` shows the combination whose checks are used most; a PDF has a page for each.

    Parameters
    ----------
    suffix : str
        ``".png"``, ``".svg"`` or ``".pdf"``.
    command, data, job, analysis
        As for `write_figure`.

    Returns
    -------
    bytes
        The file: no dates, no names of programs with their versions.
    """
    from fishbelly.cli.figures.paper import pens

    suffix = suffix.lower()
    if suffix not in FORMATS:
        raise ValueError(f"figures are written as {', '.join(FORMATS)}, not {suffix!r}")
    if command not in COMMANDS:
        raise ValueError(f"no figure is drawn for {command!r}, only for {', '.join(COMMANDS)}")
    figures = _figures(command, data, job, suffix == ".pdf", analysis)
    title = job.member.title or command
    stream = BytesIO()
    with pens():
        if suffix == ".pdf":
            _pdf(stream, figures, title)
        elif suffix == ".svg":
            next(figures).savefig(stream, format="svg", metadata={"Date": None, "Creator": "fishbelly", "Title": title})
        else:
            next(figures).savefig(stream, format="png", metadata={"Software": None})
    return stream.getvalue()


def _pdf(stream: BytesIO, figures: Iterator[Any], title: str) -> None:
    from matplotlib.backends.backend_pdf import PdfPages

    told = {"Title": title, "Creator": "fishbelly", "Producer": None, "CreationDate": None}
    with PdfPages(stream, metadata=told) as pages:
        for figure in figures:
            figure.savefig(pages, format="pdf")


def _figures(command: str, data: Mapping[str, Any], job: Any, every: bool, analysis: Any = None) -> Iterator[Any]:
    """Draw the figures of a command, one after the other; the governing one alone unless `every` is wanted."""
    from fishbelly.cli.figures import pages

    if command == "section":
        yield pages.section_page(job, data)
    elif command == "stiffness":
        yield pages.stiffness_page(job, data)
    else:
        from fishbelly.cli.figures.curves import Curves
        from fishbelly.cli.figures.governing import governing_combination

        combinations = data["combinations"]
        governs = governing_combination(combinations)
        curves = Curves(job.member, analysis, data.get("stage"))
        chosen = range(len(combinations)) if every else (governs,)
        for k in chosen:
            yield pages.deflect_page(
                job, curves, combinations[k], k == governs and len(combinations) > 1, data["stages"]
            )
