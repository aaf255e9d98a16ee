"""The rooms import in one direction, nothing heavy stands on the table road, and modules stay small."""

from __future__ import annotations

import ast
import subprocess
import sys
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[1]
ROOMS = ("catalog", "sections", "member", "cli")
FILES = [f for room in ROOMS for f in sorted((ROOT / room).rglob("*.py"))]
HEAVY = {"scipy", "matplotlib", "pandas", "xlsxwriter", "openpyxl", "pint", "rich"}
LONGEST_FILE, LONGEST_FUNCTION = 400, 50

JOB = """
title = "table road"
length = "6 m"

[[part]]
name = "beam"
material = "C24"
shape = "rectangle"
width = "100 mm"
depth = [["0 m", "300 mm"], ["6 m", "200 mm"]]

[[part]]
name = "plate"
material = "S275"
shape = "rectangle"
width = "80 mm"
depth = "8 mm"
under = "beam"
from = "1 m"
to = "5 m"

[[support]]
name = "A"
kind = "pin"
at = "0 m"

[[support]]
name = "B"
kind = "roller"
at = "6 m"

[[load]]
kind = "uniform"
value = "2 kN/m"
"""


def imported(file: Path) -> list[tuple[int, str]]:
    """Names of the modules a file imports, inside functions too, with their lines."""
    found = []
    for node in ast.walk(ast.parse(file.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            found += [(node.lineno, alias.name) for alias in node.names]
        elif isinstance(node, ast.ImportFrom):
            assert node.level == 0, f"{file}:{node.lineno}: relative imports hide their direction"
            found.append((node.lineno, node.module or ""))
            if node.module == "fishbelly":
                found += [(node.lineno, f"fishbelly.{alias.name}") for alias in node.names]
    return found


@pytest.mark.parametrize("file", FILES, ids=lambda f: str(f.relative_to(ROOT)))
def test_rooms_import_what_stands_to_their_left(file: Path) -> None:
    room = file.relative_to(ROOT).parts[0]
    allowed = ROOMS[: ROOMS.index(room) + 1]
    for line, name in imported(file):
        if name.startswith("fishbelly."):
            other = name.split(".")[1]
            assert other not in ROOMS or other in allowed, f"{file}:{line}: {room} imports {name}"
            assert other in ROOMS or room == "cli", f"{file}:{line}: {room} imports {name}"


def test_catalog_knows_no_geometry_and_member_no_people() -> None:
    barred = {
        "catalog": {"shapely", "scipy", "matplotlib", "click"},
        "sections": {"click", "tomllib", "pint", "rich", "matplotlib"},
        "member": {"click", "tomllib", "pint", "rich", "pydantic"},
    }
    for file in FILES:
        room = file.relative_to(ROOT).parts[0]
        for line, name in imported(file):
            assert name.split(".")[0] not in barred.get(room, set()), f"{file}:{line}: {name}"


def test_heavy_packages_are_imported_inside_functions_only() -> None:
    for file in FILES:
        for node in ast.parse(file.read_text(encoding="utf-8")).body:
            names = []
            if isinstance(node, ast.Import):
                names = [a.name for a in node.names]
            elif isinstance(node, ast.ImportFrom):
                names = [node.module or ""]
            for name in names:
                assert name.split(".")[0] not in HEAVY, f"{file}:{node.lineno}: {name} at the top of a module"


def modules_after(arguments: list[str], tmp_path: Path) -> set[str]:
    """Top-level names in sys.modules after the command has run in a process of its own."""
    script = (
        "import sys\nfrom fishbelly.__main__ import main\nsys.argv[:] = ['fishbelly', *sys.argv[1:]]\n"
        "try:\n    main()\nexcept SystemExit as end:\n    assert not end.code, end.code\n"
        "finally:\n    print('\\nLOADED', *sorted({m.split('.')[0] for m in sys.modules}))\n"
    )
    done = subprocess.run([sys.executable, "-c", script, *arguments], capture_output=True, text=True, cwd=tmp_path)
    assert done.returncode == 0, done.stderr
    line = next(x for x in done.stdout.splitlines() if x.startswith("LOADED"))
    return set(line.split()[1:])


@pytest.mark.parametrize("more", [[], ["--json"]], ids=["table", "json"])
def test_table_road_imports_nothing_heavy(more: list[str], tmp_path: Path) -> None:
    (tmp_path / "job.toml").write_text(JOB, encoding="utf-8")
    loaded = modules_after(["deflect", "job.toml", *more], tmp_path)
    assert "numpy" in loaded and "click" in loaded
    assert not loaded & {"scipy", "matplotlib", "pandas", "xlsxwriter", "openpyxl", "mpmath"}


def test_help_imports_click_alone(tmp_path: Path) -> None:
    loaded = modules_after(["--help"], tmp_path)
    assert "click" in loaded
    bare = subprocess.run(
        [sys.executable, "-c", "import sys, click; print(*sorted({m.split('.')[0] for m in sys.modules}))"],
        capture_output=True,
        text=True,
        check=True,
    )
    third = {m for m in loaded - set(bare.stdout.split()) if m not in sys.stdlib_module_names and not m.startswith("_")}
    assert third <= {"fishbelly"}


@pytest.mark.parametrize("file", FILES, ids=lambda f: str(f.relative_to(ROOT)))
def test_modules_and_functions_stay_small(file: Path) -> None:
    text = file.read_text(encoding="utf-8")
    assert len(text.splitlines()) < LONGEST_FILE, f"{file}: {len(text.splitlines())} lines"
    for node in ast.walk(ast.parse(text)):
        if isinstance(node, ast.FunctionDef | ast.AsyncFunctionDef):
            length = (node.end_lineno or node.lineno) - node.lineno + 1
            # what a docstring tells of shapes, units and sources does not make a function longer
            length -= len((ast.get_docstring(node, clean=False) or "").splitlines())
            assert length <= LONGEST_FUNCTION, f"{file}:{node.lineno}: {node.name} has {length} lines"
