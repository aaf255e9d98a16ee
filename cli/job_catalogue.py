"""The table ``[catalog]`` of a job: files with sections and materials of the user's own."""

from __future__ import annotations

from fishbelly.cli.faults import JobFaults
from fishbelly.cli.job_models import CatalogTable
from fishbelly.cli.job_report import Report
from fishbelly.cli.job_tables import read_table
from fishbelly.cli.job_types import Path
from fishbelly.cli.own_catalogue import Catalogue


def read_catalogue(report: Report) -> Catalogue:
    """Read the files that a job adds to the catalogue.

    Parameters
    ----------
    report : Report
        The job; takes the faults.

    Returns
    -------
    Catalogue
        With what is built in only, where the job names no files.

    Raises
    ------
    JobFaults
        Where a file has faults: without it nothing can be said of the parts that use it.
    """
    if "catalog" not in report.data:
        return Catalogue()
    before = len(report.faults)
    table = read_table(CatalogTable, report.data["catalog"], ("catalog",), report)
    if table is None:
        raise JobFaults(report.faults)
    from fishbelly.cli.catalogue_files import read_files

    paths: dict[str, Path] = {name: ("catalog", "files", k) for k, name in enumerate(table.files)}
    if len(paths) == 1 and isinstance(report.value(("catalog", "files")), str):
        paths = dict.fromkeys(paths, ("catalog", "files"))
    found = read_files(paths, report)
    if len(report.faults) > before:
        raise JobFaults(report.faults)
    return found
