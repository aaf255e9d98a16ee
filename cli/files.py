"""Results into files: what the suffix says, whole or not at all, and never over another file unasked."""

from __future__ import annotations

import errno
import os
from collections.abc import Callable, Sequence
from functools import partial
from pathlib import Path
from typing import Any

FIGURES = (".png", ".svg", ".pdf")
"""Suffixes of figures."""
WORKING = (".csv", ".json", ".xlsx", *FIGURES)
"""Suffixes that are written."""


class FileFault(Exception):
    """A file that cannot be written, said in words."""


def check_targets(paths: Sequence[str], force: bool, source: str | None = None) -> None:
    """See that files can be written, before anything is computed.

    Parameters
    ----------
    paths : sequence of str
        The files.
    force : bool
        Whether existing files are overwritten.
    source : str, optional
        The job file, which is never overwritten.

    Raises
    ------
    FileFault
        With everything wrong, a line each.
    """
    faults, seen = [], set()
    for path in paths:
        try:
            target = _checked(path, force, source)
        except FileFault as fault:
            faults.append(str(fault))
            continue
        if target in seen:
            faults.append(f'"{path}" is given twice')
        seen.add(target)
    if faults:
        raise FileFault("\n".join(faults))


def write(path: str, command: str, data: dict[str, Any], job: Any, force: bool) -> None:
    """Write results to a file.

    Parameters
    ----------
    path : str
        The file; its suffix says the format.
    command : {"deflect", "stiffness", "section"}
        Whose results they are.
    data : dict
        Results in SI units; notes are sentences.
    job : Job
        The job: its style of units, its text, its member.
    force : bool
        Whether an existing file is overwritten.

    Raises
    ------
    FileFault
        When the format is not written or the file cannot be. What stood there is then as it was.
    """
    write_all([path], command, data, job, force)


def write_all(paths: Sequence[str], command: str, data: dict[str, Any], job: Any, force: bool) -> None:
    """Write results to several files: all of them, or none.

    Parameters
    ----------
    paths : sequence of str
        The files.
    command, data, job, force
        As for `write`.

    Raises
    ------
    FileFault
        When one of them cannot be written. What stood there is then as it was.
    """
    staged: list[tuple[str, Path, Path]] = []
    try:
        for path in paths:
            target = _checked(path, force, job.name)
            content = _content(target.suffix.lower())(command, data, job)
            staged.append((path, target, _stage(path, target, content)))
        for path, target, beside in staged:
            _put(path, target, beside)
    except BaseException:
        for _, _, beside in staged:
            beside.unlink(missing_ok=True)
        raise


def write_bytes(path: str, content: bytes, force: bool) -> None:
    """Write what is ready to a file, whole or not at all; raises `FileFault`."""
    _replace(path, _checked(path, force, None), content)


def _content(suffix: str) -> Callable[[str, dict[str, Any], Any], bytes]:
    if suffix == ".csv":
        from fishbelly.cli.files_csv import csv_bytes

        return csv_bytes
    if suffix == ".xlsx":
        from fishbelly.cli.files_xlsx import xlsx_bytes

        return xlsx_bytes
    if suffix in FIGURES:
        from fishbelly.cli.figures.write import figure_bytes

        return partial(figure_bytes, suffix)
    return _json_bytes


def _json_bytes(_: str, data: dict[str, Any], __: Any) -> bytes:
    import json

    return (json.dumps(data, allow_nan=False, ensure_ascii=False) + "\n").encode("utf-8")


def _checked(path: str, force: bool, source: str | None) -> Path:
    """Give the place where the file really goes, or raise what is wrong with it."""
    shown = "".join(c if c.isprintable() else "?" for c in path)
    _check_suffix(path, shown)
    try:
        target = Path(os.path.realpath(path))
        exists = target.exists()
        if exists and target.is_dir():
            raise FileFault(f'"{shown}" is a folder, not a file')
        if exists and not target.is_file():
            raise FileFault(f'"{shown}" is not an ordinary file')
        if exists and source is not None and os.path.exists(source) and os.path.samefile(target, source):
            raise FileFault(f'"{shown}" is the job file itself')
        if exists and not force:
            raise FileFault(f'"{shown}" exists; --force overwrites it')
        if target.is_symlink():
            raise OSError(errno.ELOOP, "links in a circle")
        if not exists:
            _check_folder(shown, target.parent)
    except (OSError, ValueError) as error:
        raise FileFault(_words(shown, error)) from error
    return target


def _check_suffix(path: str, shown: str) -> None:
    suffix = Path(path).suffix.lower()
    if suffix in WORKING:
        return
    known = f"{', '.join(WORKING[:-1])} and {WORKING[-1]}"
    if not suffix:
        raise FileFault(f'"{shown}": the suffix says the format, and there is none; {known} are written')
    raise FileFault(f'"{shown}": the format {suffix} is not known; {known} are written')


def _check_folder(shown: str, folder: Path) -> None:
    if not folder.exists():
        raise FileFault(f'"{shown}": there is no folder "{folder}"')
    if not folder.is_dir():
        raise FileFault(f'"{shown}": "{folder}" is a file, not a folder')
    if not os.access(folder, os.W_OK | os.X_OK):
        raise FileFault(f'"{shown}": no permission to write in the folder "{folder}"')


def _replace(path: str, target: Path, content: bytes) -> None:
    """Write to a file beside the target, then put it in the target's place in one step."""
    beside = _stage(path, target, content)
    try:
        _put(path, target, beside)
    except BaseException:
        beside.unlink(missing_ok=True)
        raise


def _stage(path: str, target: Path, content: bytes) -> Path:
    """Write what shall stand in a file beside it, and return where."""
    beside = target.parent / f".fishbelly-{os.getpid()}-{os.urandom(4).hex()}.tmp"
    try:
        handle = os.open(beside, os.O_WRONLY | os.O_CREAT | os.O_EXCL | getattr(os, "O_BINARY", 0), 0o666)
        try:
            with os.fdopen(handle, "wb") as stream:
                stream.write(content)
                stream.flush()
                os.fsync(stream.fileno())
        except BaseException:
            beside.unlink(missing_ok=True)
            raise
    except OSError as error:
        raise FileFault(_words(path, error)) from error
    return beside


def _put(path: str, target: Path, beside: Path) -> None:
    """Put a file that stands beside its target in the target's place, in one step."""
    try:
        if target.exists():
            os.chmod(beside, target.stat().st_mode & 0o777)
        os.replace(beside, target)
    except OSError as error:
        raise FileFault(_words(path, error)) from error


_REASONS = {
    errno.ENOSPC: "the disk is full",
    errno.EDQUOT: "the quota of disk space is used up",
    errno.EFBIG: "it would be larger than the system allows",
    errno.EACCES: "no permission to write there",
    errno.EPERM: "no permission to write there",
    errno.EROFS: "that disk can only be read",
    errno.ENOENT: "there is no such folder",
    errno.ENOTDIR: "what should be its folder is a file",
    errno.EISDIR: "it is a folder, not a file",
    errno.ENAMETOOLONG: "the name is too long",
    errno.ELOOP: "its symbolic links run in a circle",
}


def _words(path: str, error: OSError | ValueError) -> str:
    number = getattr(error, "errno", None)
    reason = _REASONS.get(number) if number is not None else None
    return f'"{path}" cannot be written: {reason or getattr(error, "strerror", None) or error}'
