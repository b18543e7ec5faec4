"""The start on a machine that has Python and nothing else: finds or makes the environment a command needs.

Standard library only. The file must parse on a Python far older than Ferrule needs, so that an old one
gets a plain message and not a syntax error.
"""

import sys

NAME = "Ferrule"
CANNOT = 2  # the exit status that every command uses for 'cannot be read or written'

if sys.version_info < (3, 11):  # noqa: UP036 - the one file that an older Python reads
    sys.stderr.write(
        "%s needs Python 3.11 or newer; this is Python %d.%d (%s).\n"  # noqa: UP031 - as above
        % (NAME, sys.version_info[0], sys.version_info[1], sys.executable)
    )
    sys.exit(CANNOT)

import contextlib  # noqa: E402 - nothing below the check is reached by an older Python
import hashlib  # noqa: E402
import importlib.metadata  # noqa: E402
import importlib.util  # noqa: E402
import json  # noqa: E402
import os  # noqa: E402
import re  # noqa: E402
import shutil  # noqa: E402
import subprocess  # noqa: E402
import time  # noqa: E402
import tomllib  # noqa: E402
from collections.abc import Iterator, Sequence  # noqa: E402
from pathlib import Path  # noqa: E402
from typing import NoReturn  # noqa: E402

ROOT = Path(__file__).resolve().parent.parent
VENV = ROOT / ".venv"
PYTHON = VENV / ("Scripts/python.exe" if os.name == "nt" else "bin/python")
# The digests of what .venv has been given, written last. Empty while an installation is under way, so that
# one that was broken off is made anew; absent in an environment that uv or a person made.
STAMP = VENV / "ferrule.stamp"
LOCK = ROOT / ".venv.lock"
PINS = ROOT / "requirements.lock"
STARTS = "FERRULE_STARTS"  # how often this command has already been started again

ASK = "import sys; print(sys.implementation.cache_tag, sys.platform)"
PLATFORM = f"{sys.implementation.cache_tag} {sys.platform}"  # an environment serves one of them
NO_PIP = (
    "this Python has neither ensurepip nor pip, so nothing can be installed with it. "
    "On Debian and Ubuntu 'apt install python3-venv' brings it; 'uv run manage.py ...' works too."
)
NOT_INSTALLED = (
    "the packages were not installed; what was said of it stands above. Mostly no package index was reached: "
    "the first start needs one, and so does the first after a change of dependencies. Look at the network, "
    "the proxy (HTTPS_PROXY) and pip's settings (PIP_INDEX_URL, PIP_CERT), then give the same command again."
)


class NotReady(Exception):
    """The environment cannot be made; the message says why and what to do."""


def ready(argv: Sequence[str]) -> None:
    """Return where this interpreter has what the command needs; elsewhere start the command again in .venv.

    Nothing is made where the interpreter already has everything, as in an active environment or one of uv's.
    The new start keeps the arguments, the interpreter's own options and the exit status.

    Parameters
    ----------
    argv
        The command line as Django sees it: the program, the command, its arguments.
    """
    starts = int(os.environ.pop(STARTS, "0"))
    groups = ["test"] if list(argv[1:2]) == ["test"] else []
    try:
        needs = requirements(groups)
        if not interrupted() and has(needs):
            return
        if starts > 1:
            raise NotReady(f"the packages are installed in {VENV}, but {sys.executable} does not find them.")
        stamped = stamp_of(needs) in stamps()
        if starts or not stamped:
            install(groups, anew=stamped)
        start_again(starts + 1)
    except KeyboardInterrupt:
        say("interrupted; the same command takes up the installation again.")
        sys.exit(130)
    except (NotReady, OSError) as error:
        say(str(error))
        sys.exit(CANNOT)


def say(text: str) -> None:
    """Write one line to the error stream: standard output belongs to the command."""
    sys.stderr.write(f"{NAME}: {text}\n")
    sys.stderr.flush()


def requirements(groups: Sequence[str]) -> list[str]:
    """List what pyproject.toml names: the dependencies, and those of the dependency groups given."""
    project = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))
    needs: list[str] = list(project["project"]["dependencies"])
    for group in groups:
        needs += project["dependency-groups"][group]
    return needs


def has(needs: Sequence[str]) -> bool:
    """Tell whether this interpreter finds Django, and every requirement in a version that fits.

    A requirement with a marker (for some machines only) is installed but not asked for.
    """
    if importlib.util.find_spec("django") is None:  # the quick answer on a bare machine
        return False
    return all(";" in need or fits(need) for need in needs)


def fits(need: str) -> bool:
    """Tell whether a requirement, a name with bounds such as 'pint>=0.25,<0.26', is met here.

    Raises
    ------
    NotReady
        Where the requirement is written in a way that is not read here.
    """
    match = re.fullmatch(r"([A-Za-z0-9][A-Za-z0-9._-]*)((?:(?:>=|<)[0-9.]+,?)*)", need.replace(" ", ""))
    if match is None:
        raise NotReady(f"the requirement {need!r} in pyproject.toml is not a name with bounds (>=, <).")
    try:
        found = release(importlib.metadata.version(match[1]) or "")
    except importlib.metadata.PackageNotFoundError:
        return False
    bounds = re.findall(r"(>=|<)([0-9.]+)", match[2])
    return all((found >= release(bound)) == (sign == ">=") for sign, bound in bounds)


def release(version: str) -> tuple[int, ...]:
    """Read the numbers that open a version, so that versions compare: '5.2.1' and '5.2.1rc1' are (5, 2, 1).

    >>> release("5.2.1rc1") < release("5.10")
    True
    >>> release("6.0") == release("6")
    True
    """
    numbers = [int(number) for number in re.match(r"[0-9]*(?:\.[0-9]+)*", version)[0].split(".") if number]  # type: ignore[index]
    while numbers and numbers[-1] == 0:
        numbers.pop()
    return tuple(numbers)


def stamp_of(needs: Sequence[str]) -> str:
    """Digest what an environment is made of: the requirements, their pinned versions and the Python."""
    pins = PINS.read_text(encoding="utf-8") if PINS.exists() else ""
    made_of = [sorted(needs), pins, PLATFORM]
    return hashlib.sha256(json.dumps(made_of).encode()).hexdigest()


def stamps() -> list[str]:
    """List the digests that .venv bears; none where it is absent, unfinished or somebody else's."""
    try:
        return STAMP.read_text(encoding="ascii").split()
    except FileNotFoundError:
        return []


def interrupted() -> bool:
    """Tell whether this interpreter runs in a .venv whose installation was broken off."""
    return STAMP.exists() and not stamps() and os.path.realpath(sys.prefix) == os.path.realpath(VENV)


def install(groups: Sequence[str], *, anew: bool = False) -> None:
    """Make .venv and install into it, one start at a time; the stamp is written last.

    Parameters
    ----------
    groups
        The dependency groups wanted beside the dependencies.
    anew
        Throw away a .venv that bears the right stamp all the same: what it holds is not what was installed.

    Raises
    ------
    NotReady
        Where there is no pip to install with, or it does not succeed.
    """
    with alone() as lock:
        needs = requirements(groups)
        stamp, kept = stamp_of(needs), stamps()
        if stamp in kept and not anew:
            return  # another start did it while this one waited
        tools = " and the test tools" if groups else ""
        say(f"installing the packages it needs{tools} into {VENV}, once; this takes about a minute.")
        unfinished = STAMP.exists() and not kept
        if VENV.exists() and (anew or unfinished or answer([PYTHON, "-c", ASK]) != PLATFORM):
            shutil.rmtree(VENV)
        VENV.mkdir(exist_ok=True)
        STAMP.write_text("", encoding="ascii")
        if not PYTHON.exists():
            run([base(), "-m", "venv", "--without-pip", VENV], lock)
        pins: list[str | Path] = ["--constraint", PINS] if PINS.exists() else []
        run([*pip(lock), "-qq", "--no-input", "--disable-pip-version-check", *pins, *needs], lock)
        done = STAMP.with_suffix(".new")
        # The groups come on top of what every command needs, so one installation serves both.
        done.write_text(f"{stamp_of(requirements([]))}\n{stamp}\n", encoding="ascii")
        done.replace(STAMP)


def pip(lock: int) -> list[str | Path]:
    """Find a pip that installs into .venv: its own, one from ensurepip, or the base Python's."""
    own: list[str | Path] = [PYTHON, "-m", "pip"]
    if not answer([*own, "--version"]):
        with contextlib.suppress(NotReady):
            run([PYTHON, "-m", "ensurepip"], lock, quiet=True)
    if answer([*own, "--version"]):
        return [*own, "install"]
    if answer([base(), "-m", "pip", "--version"]):  # Debian without python3-venv: pip, but no ensurepip
        folder = answer([PYTHON, "-c", "import sysconfig; print(sysconfig.get_path('purelib'))"])
        return [base(), "-m", "pip", "install", "--upgrade", "--target", folder]
    raise NotReady(NO_PIP)


def run(command: Sequence[str | Path], lock: int, *, quiet: bool = False) -> None:
    """Run one step of the installation.

    The child inherits the lock: where only this process is killed, the next start waits for the child too.

    Raises
    ------
    NotReady
        Where it ends with another status than 0.
    """
    done = subprocess.run(
        command,
        stdin=subprocess.DEVNULL,
        stdout=subprocess.DEVNULL if quiet else sys.stderr,
        stderr=subprocess.DEVNULL if quiet else None,
        env=os.environ | {"PIP_USER": "0", "PIP_REQUIRE_VIRTUALENV": "0", "PIP_ROOT_USER_ACTION": "ignore"},
        pass_fds=() if sys.platform == "win32" else (lock,),
        check=False,
    )
    if done.returncode:
        raise NotReady(NOT_INSTALLED)


def answer(command: Sequence[str | Path]) -> str:
    """Return what a command prints, or nothing where it cannot be run or fails."""
    try:
        done = subprocess.run(command, stdin=subprocess.DEVNULL, capture_output=True, text=True, check=True)
    except (OSError, subprocess.CalledProcessError):
        return ""
    return done.stdout.strip()


def base() -> str:
    """Name the interpreter that .venv is made from: where this one is an environment's, the one behind it."""
    return getattr(sys, "_base_executable", "") or sys.executable


@contextlib.contextmanager
def alone() -> Iterator[int]:
    """Hold the lock on the installation, whose file descriptor it yields; it falls with the process."""
    with LOCK.open("a", encoding="ascii") as file:
        if not grasp(file.fileno()):
            say("another start is installing; waiting for it.")
            while not grasp(file.fileno()):
                time.sleep(0.2)
        yield file.fileno()


def grasp(lock: int) -> bool:
    """Try to take the lock; tell whether it is held."""
    try:
        if sys.platform == "win32":
            import msvcrt

            msvcrt.locking(lock, msvcrt.LK_NBLCK, 1)
        else:
            import fcntl

            fcntl.flock(lock, fcntl.LOCK_EX | fcntl.LOCK_NB)
    except (BlockingIOError, PermissionError):
        return False
    return True


def start_again(starts: int) -> NoReturn:
    """Start the same command line in .venv, with its exit status as this process's own."""
    os.environ[STARTS] = str(starts)
    command = [str(PYTHON), *sys.orig_argv[1:]]
    if sys.platform == "win32":  # os.execv returns to the prompt there before the command has ended
        sys.exit(subprocess.run(command, check=False).returncode)
    os.execv(command[0], command)  # noqa: S606
