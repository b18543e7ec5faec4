"""The start on a bare machine, played in a small project of its own: no network, and mostly no real pip."""

import ast
import json
import os
import shutil
import signal
import subprocess
import sys
import time
import zipfile
from collections.abc import Callable
from dataclasses import dataclass
from pathlib import Path

import pytest

from config import bootstrap

CODE = bootstrap.ROOT
BASE = bootstrap.base()

DJANGO = """
import json, os, sys
def execute_from_command_line(argv):
    print(json.dumps([argv[1:], sys.prefix, sys.flags.utf8_mode, os.environ.get("FERRULE_STARTS")]))
    sys.exit(int(os.environ.get("STATUS", "0")))
"""

# Stands in for pip: notes what it is asked for, then does as PIP_DOES says.
PIP = """
import json, os, sys, sysconfig, time, zipfile
from pathlib import Path
does, log = os.environ.get("PIP_DOES", "install"), Path(os.environ["PIP_LOG"])
if "--version" in sys.argv:
    print("pip")
    sys.exit(does == "absent" or does == "only outside" and sys.prefix != sys.base_prefix)
with log.open("a") as out:
    out.write(json.dumps(sys.argv[1:]) + "\\n")
print("what pip prints", flush=True)
if does == "fail":
    sys.exit("ERROR: no matching distribution")
while does == "hang" and not log.with_name("released").exists():
    time.sleep(0.02)
time.sleep(float(os.environ.get("PIP_TAKES", "0")))
target = sys.argv[sys.argv.index("--target") + 1] if "--target" in sys.argv else sysconfig.get_path("purelib")
for wheel in Path(os.environ["PIP_FIND_LINKS"]).iterdir() if does != "nothing" else ():
    if any(need.lower().startswith(wheel.name.split("-")[0].lower()) for need in sys.argv):
        zipfile.ZipFile(wheel).extractall(target)
"""

PYPROJECT = """
[project]
dependencies = ["Django>=5.2,<5.3", "probe>={probe}"]
[dependency-groups]
test = ["gauge>=1"]
"""


def wheel(folder: Path, name: str, version: str, module: str, text: str) -> None:
    """Write the smallest package that pip installs."""
    info = f"{name}-{version}.dist-info"
    with zipfile.ZipFile(folder / f"{name}-{version}-py3-none-any.whl", "w") as file:
        file.writestr(module, text)
        file.writestr(f"{info}/METADATA", f"Metadata-Version: 2.1\nName: {name}\nVersion: {version}\n")
        file.writestr(f"{info}/WHEEL", "Wheel-Version: 1.0\nRoot-Is-Purelib: true\nTag: py3-none-any\n")
        file.writestr(f"{info}/RECORD", f"{module},,\n{info}/METADATA,,\n{info}/WHEEL,,\n{info}/RECORD,,\n")


@dataclass(frozen=True, slots=True, kw_only=True)
class Project:
    """A clone with made-up dependencies, and an environment in which to start it."""

    folder: Path
    environment: dict[str, str]

    @property
    def venv(self) -> Path:
        return self.folder / ".venv"

    @property
    def stamp(self) -> Path:
        return self.venv / "ferrule.stamp"

    @property
    def installations(self) -> list[list[str]]:
        log = Path(self.environment["PIP_LOG"])
        return [json.loads(line) for line in log.read_text().splitlines()] if log.exists() else []

    def release(self) -> None:
        """Let a hanging pip end."""
        Path(self.environment["PIP_LOG"]).with_name("released").touch()

    def needs(self, probe: str) -> None:
        """Ask for a version of the probe."""
        (self.folder / "pyproject.toml").write_text(PYPROJECT.format(probe=probe))

    def begin(self, *argv: str, python: str = BASE, **environment: str) -> subprocess.Popen[str]:
        return subprocess.Popen(
            [python, "-X", "utf8", self.folder / "manage.py", *argv],
            stdin=subprocess.DEVNULL,
            stdout=subprocess.PIPE,
            stderr=subprocess.PIPE,
            text=True,
            cwd=self.folder.parent,
            env=self.environment | environment,
            start_new_session=True,
            # A shell starts what it puts in the background with interruptions ignored, and children inherit that.
            preexec_fn=lambda: signal.signal(signal.SIGINT, signal.SIG_DFL),
        )

    def start(self, *argv: str, status: int = 0, **options: str) -> tuple[str, str]:
        """Start it; return what it printed on standard output and on the error stream."""
        process = self.begin(*argv, **options)
        out, err = process.communicate(timeout=120)
        assert process.returncode == status, err
        assert "Traceback" not in err
        return out, err


def printed(project: Project, *argv: str) -> str:
    """What Django's stand-in prints, from within .venv, with nothing of the bootstrap left behind."""
    return json.dumps([[*argv], str(project.venv), 1, None]) + "\n"


def until(condition: Callable[[], bool]) -> None:
    """Wait for something that must come."""
    end = time.monotonic() + 60
    while not condition():
        assert time.monotonic() < end
        time.sleep(0.02)


@pytest.fixture
def project(tmp_path: Path) -> Project:
    """A fresh clone, and a pip that is the stand-in above."""
    folder, wheels, stand_in = tmp_path / "the clone", tmp_path / "wheels", tmp_path / "stand-in"
    for name in ("manage.py", "config/__init__.py", "config/bootstrap.py"):
        (folder / name).parent.mkdir(parents=True, exist_ok=True)
        shutil.copy(CODE / name, folder / name)
    wheels.mkdir()
    wheel(wheels, "Django", "5.2.1", "django/core/management/__init__.py", DJANGO)
    wheel(wheels, "probe", "2.0", "probe.py", "")
    wheel(wheels, "gauge", "1.0", "gauge.py", "")
    stand_in.mkdir()
    (stand_in / "pip.py").write_text(PIP)
    (stand_in / "ensurepip.py").write_text("raise SystemExit(1)")
    made = Project(
        folder=folder,
        environment={
            "PATH": os.environ["PATH"],
            "HOME": str(tmp_path),
            "PYTHONPATH": str(stand_in),
            "PIP_LOG": str(tmp_path / "log"),
            "PIP_FIND_LINKS": str(wheels),
        },
    )
    made.needs("1")
    return made


def test_the_first_start_with_real_pip(project: Project) -> None:
    for name in ("PYTHONPATH", "PIP_LOG"):
        del project.environment[name]
    project.environment.update(PIP_NO_INDEX="1", PIP_CONFIG_FILE=os.devnull)
    out, err = project.start("audit", "a list.xlsx", "--to", "out", STATUS="1", status=1)
    assert out == printed(project, "audit", "a list.xlsx", "--to", "out")
    assert err == (f"Ferrule: installing the packages it needs into {project.venv}, once; this takes about a minute.\n")
    assert not list(project.venv.rglob("gauge.py"))
    assert project.start("audit") == (printed(project, "audit"), "")
    out, err = project.start("test", "-k", "span")
    assert (out, err.count("\n")) == (printed(project, "test", "-k", "span"), 1)
    assert list(project.venv.rglob("gauge.py"))


@pytest.mark.parametrize("status", [0, 1, 2, 3, 130])
def test_arguments_and_status_are_kept(project: Project, status: int) -> None:
    argv = ("read", "unit", "--json", "--", "kg/cm² (g)", "", "a'b\"c $HOME *", "-x")
    for _ in range(2):
        out, _err = project.start(*argv, STATUS=str(status), status=status)
        assert out == printed(project, *argv)
    assert len(project.installations) == 1


def test_the_test_tools_are_installed_for_test_alone(project: Project) -> None:
    project.start("audit")
    project.start("test")
    project.start("audit")
    project.start("test")
    asked = [[need for need in call if need.startswith(("Django", "probe", "gauge"))] for call in project.installations]
    assert asked == [["Django>=5.2,<5.3", "probe>=1"], ["Django>=5.2,<5.3", "probe>=1", "gauge>=1"]]


def test_an_environment_that_has_everything_is_used_as_it_is(project: Project, tmp_path: Path) -> None:
    project.start("audit")
    active = tmp_path / "active"
    project.venv.rename(active)
    out, err = project.start("audit", python=str(active / "bin/python"))
    assert (json.loads(out)[1], err) == (str(active), "")
    assert not project.venv.exists()
    # It has no test tools: they go into .venv, and the active environment stays as it is.
    out, err = project.start("test", python=str(active / "bin/python"))
    assert out == printed(project, "test")
    assert not list(active.rglob("gauge.py"))


def test_simultaneous_starts_install_once(project: Project) -> None:
    starts = [project.begin("audit", str(n), PIP_TAKES="1") for n in range(4)]
    ends = [start.communicate(timeout=60) for start in starts]
    assert [start.returncode for start in starts] == [0, 0, 0, 0]
    assert [out for out, _err in ends] == [printed(project, "audit", str(n)) for n in range(4)]
    assert len(project.installations) == 1
    told = sorted(err.removeprefix("Ferrule: ").split()[0] for _out, err in ends if err)
    assert told in (["another"] * waited + ["installing"] for waited in range(4))


def test_a_killed_installation_is_made_anew(project: Project) -> None:
    first = project.begin("audit", PIP_DOES="hang")
    until(lambda: len(project.installations) == 1)
    (project.venv / "half").touch()
    first.kill()
    first.wait()
    # Its pip lives on and still writes: the next start must not touch the environment before that has ended.
    second = project.begin("audit")
    assert second.stderr is not None
    assert second.stderr.readline() == "Ferrule: another start is installing; waiting for it.\n"
    assert (project.venv / "half").exists()
    project.release()
    out, _err = second.communicate(timeout=60)
    assert (second.returncode, out) == (0, printed(project, "audit"))
    assert not (project.venv / "half").exists()
    assert len(project.installations) == 2


def test_an_interrupted_installation_says_so_and_is_made_anew(project: Project) -> None:
    first = project.begin("audit", PIP_DOES="hang")
    until(lambda: len(project.installations) == 1)
    (project.venv / "half").touch()
    os.killpg(first.pid, signal.SIGINT)
    out, err = first.communicate(timeout=60)
    assert (first.returncode, out) == (130, "")
    assert err.endswith("Ferrule: interrupted; the same command takes up the installation again.\n")
    assert project.stamp.read_text() == ""
    assert project.start("audit")[0] == printed(project, "audit")
    assert not (project.venv / "half").exists()


def test_a_broken_off_environment_is_not_trusted_from_inside(project: Project) -> None:
    project.start("audit")
    project.stamp.write_text("")
    project.start("audit", python=str(project.venv / "bin/python"))
    assert len(project.installations) == 2
    assert len(project.stamp.read_text().split()) == 2


def test_without_a_package_index(project: Project) -> None:
    out, err = project.start("audit", PIP_DOES="fail", status=2)
    assert out == ""
    assert err.splitlines()[1:] == [
        "what pip prints",
        "ERROR: no matching distribution",
        f"Ferrule: {bootstrap.NOT_INSTALLED}",
    ]
    assert project.stamp.read_text() == ""
    assert project.start("audit")[0] == printed(project, "audit")


def test_what_is_installed_but_not_found_ends_and_does_not_start_for_ever(project: Project) -> None:
    _out, err = project.start("audit", PIP_DOES="nothing", status=2)
    assert err.endswith("does not find them.\n")
    assert len(project.installations) == 2


def test_a_change_of_dependencies_is_installed_once(project: Project) -> None:
    project.start("audit")
    (project.venv / "kept").touch()
    project.needs("2")
    project.start("audit")
    project.start("audit")
    assert [call[-1] for call in project.installations] == ["probe>=1", "probe>=2"]
    assert (project.venv / "kept").exists()


def test_a_change_of_pins_is_installed_once(project: Project) -> None:
    project.start("audit")
    pins = project.folder / "requirements.lock"
    pins.write_text("probe==2.0\n")
    project.start("audit")
    project.start("audit")
    assert len(project.installations) == 2
    assert project.installations[1][-4:] == ["--constraint", str(pins), "Django>=5.2,<5.3", "probe>=1"]


def test_what_somebody_removed_is_installed_again(project: Project) -> None:
    project.start("audit")
    shutil.rmtree(next(project.venv.rglob("django")))
    assert project.start("audit")[0] == printed(project, "audit")
    assert len(project.installations) == 2


def test_an_environment_made_by_another_tool_is_completed(project: Project) -> None:
    subprocess.run([BASE, "-m", "venv", "--without-pip", project.venv], check=True)
    (project.venv / "kept").touch()
    project.start("audit")
    assert (project.venv / "kept").exists()


def test_an_environment_of_another_python_is_made_anew(project: Project) -> None:
    project.start("audit")
    stamp = project.stamp.read_text()
    project.stamp.write_text("of-another-python\n")
    python = project.venv / "bin/python"
    python.unlink()
    python.write_text("#!/bin/sh\necho cpython-310 linux\n")
    python.chmod(0o755)
    assert project.start("audit")[0] == printed(project, "audit")
    assert project.stamp.read_text() == stamp


def test_the_stamp_tells_pythons_apart(monkeypatch: pytest.MonkeyPatch) -> None:
    stamp = bootstrap.stamp_of(["pint"])
    assert stamp == bootstrap.stamp_of(["pint"]) != bootstrap.stamp_of(["pint", "rich"])
    monkeypatch.setattr(bootstrap, "PLATFORM", "cpython-399 linux")
    assert bootstrap.stamp_of(["pint"]) != stamp


def test_without_ensurepip_the_base_pip_installs_into_the_environment(project: Project) -> None:
    assert project.start("audit", PIP_DOES="only outside")[0] == printed(project, "audit")
    (call,) = project.installations
    assert Path(call[call.index("--target") + 1]).is_relative_to(project.venv)


def test_without_any_pip(project: Project) -> None:
    _out, err = project.start("audit", PIP_DOES="absent", status=2)
    assert err.endswith(f"Ferrule: {bootstrap.NO_PIP}\n")


def test_what_cannot_be_made_is_said_plainly(project: Project) -> None:
    project.venv.write_text("a file in the way")
    _out, err = project.start("audit", status=2)
    assert str(project.venv) in err.splitlines()[-1]


@pytest.mark.parametrize("version", [(2, 7, 18), (3, 10, 99)])
def test_an_old_python_is_told_plainly(version: tuple[int, int, int]) -> None:
    code = f"import runpy, sys; sys.version_info = {version}; runpy.run_path('manage.py', run_name='__main__')"
    done = subprocess.run([sys.executable, "-c", code], cwd=CODE, capture_output=True, text=True, check=False)
    assert (done.returncode, done.stdout) == (2, "")
    assert done.stderr == (
        f"Ferrule needs Python 3.11 or newer; this is Python {version[0]}.{version[1]} ({sys.executable}).\n"
    )


@pytest.mark.parametrize("name", ["manage.py", "config/__init__.py", "config/bootstrap.py"])
def test_what_an_old_python_reads_is_old_syntax(name: str) -> None:
    ast.parse((CODE / name).read_text(encoding="utf-8"), feature_version=(3, 6))


@pytest.mark.parametrize(
    ("need", "version", "met"),
    [
        ("probe", "0", True),
        ("probe>=5.2,<5.3", "5.2", True),
        ("probe>=5.2,<5.3", "5.2.19", True),
        ("probe >= 5.2, < 5.3", "5.2.0", True),
        ("probe>=5.2,<5.3", "5.1.99", False),
        ("probe>=5.2,<5.3", "5.3", False),
        ("probe>=5.2,<5.3", "5.3rc1", False),
        ("probe>=5.2,<5.3", "5.10", False),
        ("probe>=3.9", "3.10", True),
        ("probe<6", "6.0.0", False),
        ("probe>=6.0", "6", True),
        ("probe>=1", None, False),
    ],
)
def test_bounds(monkeypatch: pytest.MonkeyPatch, need: str, version: str | None, met: bool) -> None:
    def installed(name: str) -> str:
        assert name == "probe"
        if version is None:
            raise bootstrap.importlib.metadata.PackageNotFoundError(name)
        return version

    monkeypatch.setattr(bootstrap.importlib.metadata, "version", installed)
    assert bootstrap.fits(need) is met


@pytest.mark.parametrize("need", ["probe[extra]>=1", "probe~=1.0", "probe==1", "probe>=1.*", "", "-e ."])
def test_what_the_bounds_do_not_cover_is_refused(need: str) -> None:
    with pytest.raises(bootstrap.NotReady, match="not a name with bounds"):
        bootstrap.fits(need)
