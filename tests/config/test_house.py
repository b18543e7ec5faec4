"""The house itself: lint, types, import contracts, migrations, and what may stand at the top level."""

import ast
import re
import subprocess
import sys
import tomllib
from collections.abc import Iterator
from pathlib import Path

import grimp
import pytest

from config import bootstrap

ROOT = bootstrap.ROOT
LAYERS = ("config", "validation", "loops", "instruments")
TOP_LEVEL = {
    *LAYERS,
    "tests",
    "fixtures",
    "README.md",
    "DEVELOPERS.md",
    "LICENSE",
    "manage.py",
    "pyproject.toml",
    "requirements.lock",
}
# A line is found by its subject; these names take whatever nobody found a home for.
NO_SUBJECT = {
    "utils",
    "util",
    "helpers",
    "helper",
    "common",
    "manager",
    "managers",
    "misc",
    "base",
    "core",
    "lib",
}

# Who may reach, through however many modules, what only the edges know.
EDGES = {
    "django": r"config\..+|\w+\.management\..+",
    "openpyxl": r"instruments\.workbook\..+|validation\.report(\..+)?|config\..+|\w+\.management\..+",
    "python_calamine": r"instruments\.workbook\..+|validation\.report\.annotated|config\..+|\w+\.management\..+",
    "reportlab": r"loops\.sheet\..+|config\..+|\w+\.management\..+",
}


def run(*command: str) -> None:
    """Run this interpreter in the project's folder; what it printed is the failure."""
    done = subprocess.run([sys.executable, *command], cwd=ROOT, capture_output=True, text=True, check=False)
    assert done.returncode == 0, done.stdout + done.stderr


def belongs(pattern: str = "*") -> list[Path]:
    """List the project's files: git's, or, in a copy without git, all but what it would ignore."""
    if (ROOT / ".git").exists():
        git = [
            "git",
            "-c",
            f"safe.directory={ROOT}",
            "ls-files",
            "--cached",
            "-z",
            "--",
            f":(glob)**/{pattern}",
        ]
        listed = subprocess.run(git, cwd=ROOT, capture_output=True, text=True, check=True).stdout
        return [path for name in listed.split("\0") if name and (ROOT / (path := Path(name))).exists()]
    return [
        path
        for file in ROOT.rglob(pattern)
        if not (path := file.relative_to(ROOT)).parts[0].startswith(".")
        and path.parts[0] != "out"
        and "__pycache__" not in path.parts
        and file.is_file()
    ]


def test_lint() -> None:
    run("-m", "ruff", "check", "--quiet", ".")


def test_format() -> None:
    run("-m", "ruff", "format", "--quiet", "--check", ".")


def test_types() -> None:
    run("-m", "mypy")


def test_import_contracts() -> None:
    run("-c", "from importlinter.cli import lint_imports_command; lint_imports_command()", "--no-cache")


def test_system_checks() -> None:
    run("-m", "django", "check", "--fail-level", "WARNING", "--settings", "config.settings")


def test_migrations_say_what_the_models_say() -> None:
    run("-m", "django", "makemigrations", "--check", "--dry-run", "--settings", "config.settings")


@pytest.fixture(scope="module")
def graph() -> grimp.ImportGraph:
    """Who imports whom, packages from elsewhere included."""
    return grimp.build_graph(*LAYERS, include_external_packages=True, cache_dir=None)


@pytest.mark.parametrize("foreign", EDGES)
def test_only_edges_reach_what_edges_know(graph: grimp.ImportGraph, foreign: str) -> None:
    reach = graph.find_downstream_modules(foreign) if foreign in graph.modules else set()
    assert [module for module in sorted(reach) if not re.fullmatch(EDGES[foreign], module)] == []


def test_the_graph_sees_what_edges_know(graph: grimp.ImportGraph) -> None:
    """Without it a misspelt name above would be found nowhere, and pass."""
    assert EDGES.keys() <= graph.modules


def test_every_module_is_in_the_graph(graph: grimp.ImportGraph) -> None:
    """A folder without __init__.py escapes the contracts."""
    modules = {
        ".".join(path.with_suffix("").parts).removesuffix(".__init__")
        for path in belongs("*.py")
        if path.parts[0] in LAYERS
    }
    assert sorted(modules - graph.modules) == []


def test_the_top_level_holds_nothing_else() -> None:
    names = {path.parts[0] for path in belongs()}
    assert sorted(name for name in names - TOP_LEVEL if not name.startswith(".")) == []


def test_no_file_is_named_for_having_no_subject() -> None:
    assert [path for path in belongs() if NO_SUBJECT & {part.partition(".")[0] for part in path.parts}] == []


@pytest.mark.parametrize("path", [path for path in belongs("*.py") if path.parts[0] in LAYERS], ids=str)
def test_a_module_opens_with_one_sentence(path: Path) -> None:
    tree = ast.parse((ROOT / path).read_text(encoding="utf-8"))
    first = (ast.get_docstring(tree) or "").partition("\n\n")[0]
    empty_package = path.name == "__init__.py" and not tree.body
    assert empty_package or first.endswith("."), (
        f"the first paragraph says in one sentence what belongs in {path}: {first!r}"
    )


def test_packages_are_imported_late() -> None:
    """Starting up loads none of the slow ones, and no database: the audit of a file needs none."""
    late = ["openpyxl", "pint", "python_calamine", "reportlab", "rapidfuzz", "sqlite3"]
    code = f"import django, sys; django.setup(); sys.exit(' '.join(set({late}) & set(sys.modules)))"
    done = subprocess.run(
        [sys.executable, "-c", code],
        cwd=ROOT,
        env={"DJANGO_SETTINGS_MODULE": "config.settings"},
        capture_output=True,
        text=True,
        check=False,
    )
    assert (done.stderr.strip(), done.stdout) == ("", "")


PROJECT = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))
NEEDS = [*PROJECT["project"]["dependencies"], *PROJECT["dependency-groups"]["test"]]


@pytest.mark.parametrize("need", NEEDS)
def test_a_dependency_is_bounded_installed_and_pinned(need: str) -> None:
    bounds = need.partition(";")[0].strip()
    assert ">=" in bounds
    assert "<" in bounds
    name = re.split("[<>]", bounds)[0]
    pins = dict(pinned())
    pin = pins[normal(name)]
    assert bootstrap.release(pin) >= bootstrap.release(re.findall(">=([0-9.]+)", bounds)[0])
    assert bootstrap.release(pin) < bootstrap.release(re.findall("<([0-9.]+)", bounds)[0])
    assert ";" in need or bootstrap.fits(bounds)


def normal(name: str) -> str:
    """Write a package's name as the index compares it."""
    return re.sub("[-_.]+", "-", name).lower()


def pinned() -> Iterator[tuple[str, str]]:
    """Yield the names and versions of the lock file."""
    for line in (ROOT / "requirements.lock").read_text(encoding="utf-8").splitlines():
        if line and not line.startswith("#"):
            name, _, version = line.partition(";")[0].strip().partition("==")
            yield normal(name), version


def test_the_lock_file_pins_and_names_no_registry() -> None:
    assert all(re.fullmatch(r"[0-9][0-9.]*", version) for _name, version in pinned())
    assert "://" not in (ROOT / "requirements.lock").read_text(encoding="utf-8")


def test_each_dependency_says_what_it_saves() -> None:
    lines = (ROOT / "pyproject.toml").read_text(encoding="utf-8").splitlines()
    for need in NEEDS:
        at = next(n for n, line in enumerate(lines) if line.strip().strip(",").strip('"') == need)
        above = at - 1
        while lines[above - 1].lstrip().startswith("#"):
            above -= 1
        assert re.match(r"# Saves .+", lines[above].strip()), need
        assert re.search(r"[.]$", lines[at - 1]), need
