"""What becomes of a reading that kills, fills or stops the process that does it."""

from __future__ import annotations

import datetime
import io
import os
import pickle
import subprocess
import sys
import threading
import time
from pathlib import Path

import pytest

from instruments.column import SheetKind
from instruments.workbook import reading_process
from instruments.workbook.files import read_lists
from instruments.workbook.package import LIMITS, Limits
from instruments.workbook.reader import read_file
from instruments.workbook.reading_process import ReadingProcess, read_apart
from instruments.workbook.sheet import Sheet, UnreadableFile
from tests.instruments.workbook.packages import parts, styles, texts, worksheet, zipped

posix = pytest.mark.skipif(os.name != "posix", reason="the platform has no such limits and signals")
linux = pytest.mark.skipif(sys.platform != "linux", reason="memory is limited where the platform can; surely on Linux")

# A process that reads as this one would, but for `bad.csv`, where something happens instead.
INSTEAD = """
from instruments.workbook import reader
as_ever = reader.read_file
def read_file(path, **how):
    if not path.endswith("bad.csv"):
        return as_ever(path, **how)
    import ctypes, os, signal, sys, time
    {happens}
reader.read_file = read_file
at.serve(sys.stdin.buffer, sys.stdout.buffer)
"""


@pytest.fixture
def bad(tmp_path: Path) -> Path:
    path = tmp_path / "bad.csv"
    path.write_text("Tag,Service\nPT-1,Feed\n")
    return path


@pytest.fixture
def good(tmp_path: Path) -> Path:
    path = tmp_path / "good.csv"
    path.write_text("Tag,Service\nPT-2,Return\n")
    return path


def happen(monkeypatch: pytest.MonkeyPatch, happens: str) -> None:
    monkeypatch.setattr(reading_process, "SERVE", INSTEAD.format(happens=happens).strip())


@posix
@pytest.mark.parametrize(
    ("happens", "reason"),
    [
        ("os.abort()", "stops the reader (SIGABRT): it is damaged; open it in a spreadsheet and save it anew"),
        ("ctypes.string_at(0)", "stops the reader (SIGSEGV): it is damaged; open it in a spreadsheet and save it anew"),
        ("os.kill(os.getpid(), signal.SIGKILL)", "was being read when the system ended the reader (SIGKILL)"),
        ("sys.stderr.write('memory allocation of 99999 bytes failed'); os.abort()", "takes more than 600 MB to read"),
        ("raise MemoryError", "takes more than 600 MB to read, as no list of its size does"),
        ("os._exit(0)", "cannot be read: the reader's answer is no sheet"),
        ("sys.stderr.write('first\\nsomething odd\\n'); sys.stderr.flush(); os._exit(3)", "broke off (something odd)"),
        ("raise KeyError('ref')", "the reader broke off (KeyError in <string>, line 10: 'ref')"),
        ("sys.stdout.buffer.write(b'\\x80\\x05X'); os._exit(0)", "cannot be read: the reader's answer is no sheet"),
        ("return os.system", "cannot be read: the reader's answer is no sheet"),
    ],
)
def test_what_ends_the_reader_names_the_file_and_costs_this_reading_only(
    monkeypatch: pytest.MonkeyPatch, bad: Path, good: Path, happens: str, reason: str
) -> None:
    happen(monkeypatch, happens)
    with ReadingProcess([(good, {}), (bad, {})]) as reading:
        assert reading.sheets_of(good) == read_file(good)
        with pytest.raises(UnreadableFile) as caught:
            reading.sheets_of(bad)
    assert (caught.value.file, caught.value.place) == (str(bad), "")
    assert reason in caught.value.reason


@linux
@pytest.mark.parametrize("happens", ["return [bytearray(700_000_000)]", "return b'x' * 10 ** 11"])
def test_the_memory_is_limited(monkeypatch: pytest.MonkeyPatch, bad: Path, happens: str) -> None:
    happen(monkeypatch, happens)
    with pytest.raises(UnreadableFile, match="takes more than 600 MB to read, as no list of its size does"):
        read_apart([(bad, {})])


def test_a_reading_has_a_deadline(monkeypatch: pytest.MonkeyPatch, bad: Path, good: Path) -> None:
    happen(monkeypatch, "time.sleep(60)")
    since = time.monotonic()
    with pytest.raises(UnreadableFile, match=r"bad\.csv: was not read within 2 s, as any list of its size is\.$"):
        read_apart([(good, {}), (bad, {})], limits=Limits(seconds=2.0))
    assert time.monotonic() - since < 20


def test_a_reader_that_answers_half_and_waits_has_a_deadline_too(monkeypatch: pytest.MonkeyPatch, bad: Path) -> None:
    happen(monkeypatch, "sys.stdout.buffer.write(b'\\x80\\x05X\\xff'); sys.stdout.buffer.flush(); time.sleep(60)")
    with pytest.raises(UnreadableFile, match="was not read within 2 s"):
        read_apart([(bad, {})], limits=Limits(seconds=2.0))


def test_no_process_is_left(monkeypatch: pytest.MonkeyPatch, bad: Path) -> None:
    happen(monkeypatch, "time.sleep(60)")
    reading = ReadingProcess([(bad, {})])
    with pytest.raises(KeyboardInterrupt), reading:
        raise KeyboardInterrupt
    assert reading._process.returncode is not None
    assert threading.active_count() == 1 or not any(
        isinstance(each, threading.Timer) and not each.finished.is_set() for each in threading.enumerate()
    )


@linux
def test_the_reader_ends_by_itself_where_whoever_asked_was_killed(tmp_path: Path) -> None:
    """A reader without end has a limit on its processor time, and a finished one finds nobody to answer to."""
    code = (
        "import resource, sys\n"
        "from instruments.workbook.package import Limits\n"
        "from instruments.workbook.reading_process import confine\n"
        "confine('none', Limits(seconds=0.1))\n"
        "while True: pass\n"
    )
    done = subprocess.run([sys.executable, "-c", code], timeout=60, check=False, cwd=Path(__file__).parents[3])
    assert done.returncode < 0


@linux
def test_limits_that_stand_already_are_not_widened() -> None:
    code = (
        "import resource\n"
        "from instruments.workbook.package import Limits\n"
        "from instruments.workbook.reading_process import confine\n"
        "resource.setrlimit(resource.RLIMIT_AS, (300_000_000, 300_000_000))\n"
        "confine('none', Limits())\n"
        "assert resource.getrlimit(resource.RLIMIT_AS) == (300_000_000, 300_000_000)\n"
        "assert resource.getrlimit(resource.RLIMIT_CORE)[0] == 0\n"
    )
    subprocess.run([sys.executable, "-c", code], timeout=60, check=True, cwd=Path(__file__).parents[3])


@pytest.mark.parametrize(
    ("size", "memory", "seconds"),
    [(0, 600_000_000, 20.0), (1_000_000, 625_000_000, 25.0), (52_000_000, 1_900_000_000, 280.0)],
)
def test_what_a_file_of_a_size_may_take(size: int, memory: int, seconds: float) -> None:
    assert (LIMITS.memory_for(size), LIMITS.seconds_for(size)) == (memory, seconds)


def test_everything_that_a_sheet_holds_comes_back(tmp_path: Path) -> None:
    rows = (
        '<row r="1"><c r="A1" t="s"><v>0</v></c><c r="B1" s="1"><v>45000</v></c><c r="C1"><v>1.5</v></c>'
        '<c r="D1" t="b"><v>1</v></c><c r="E1" t="e"><v>#REF!</v></c><c r="F1"><f>A1</f></c></row>'
        '<row r="2" hidden="1"><c r="A2" t="s"><v>1</v></c></row>'
    )
    path = tmp_path / "all.xlsx"
    path.write_bytes(
        zipped(
            parts(
                worksheet(rows, after='<mergeCells><mergeCell ref="A2:B2"/></mergeCells>'),
                shared=texts("<t>PT-1</t>", "<r><rPr><strike/></rPr><t>old</t></r><r><t>new</t></r>"),
                style=styles(
                    cells='<xf fontId="0"/><xf fontId="0" numFmtId="14"/>',
                ),
            )
        )
    )
    (sheets,) = read_apart([(path, {})])
    assert sheets == read_file(path)
    assert isinstance(sheets[0].rows[0][1], datetime.date)
    assert sheets[0].errors
    assert sheets[0].no_value
    assert sheets[0].partly_struck
    assert sheets[0].hidden_rows
    assert sheets[0].merged


def test_files_come_back_in_order_each_read_as_asked(tmp_path: Path) -> None:
    (tmp_path / "one.csv").write_bytes("Tag;Größe\nPT-1;5\n".encode())
    (tmp_path / "two.csv").write_text("Tag,Service\nPT-2,Feed\n")
    told: list[str] = []
    meanwhile: list[str] = []
    read = read_apart(
        [(tmp_path / "one.csv", {"separator": ","}), (tmp_path / "two.csv", {})],
        on_file=told.append,
        meanwhile=lambda: meanwhile.append("once"),
    )
    assert read == [
        read_file(tmp_path / "one.csv", separator=","),
        read_file(tmp_path / "two.csv"),
    ]
    assert told == [str(tmp_path / "one.csv"), str(tmp_path / "two.csv")]
    assert meanwhile == ["once"]


@pytest.mark.parametrize(
    ("name", "data", "reason"),
    [
        ("none.xlsx", None, "there is no such file"),
        ("empty.xlsx", b"", "is empty"),
        ("list.xlsx", b"PK\3\4 and no more", "is damaged or cut short"),
        ("a\ud800.csv", None, ""),
    ],
)
def test_what_the_reader_says_is_said_word_by_word(tmp_path: Path, name: str, data: bytes | None, reason: str) -> None:
    path = tmp_path / name
    if data is not None:
        path.write_bytes(data)
    with pytest.raises(UnreadableFile) as here:
        read_file(path)
    with pytest.raises(UnreadableFile) as apart:
        read_apart([(path, {})])
    assert str(apart.value) == str(here.value)
    assert reason in str(here.value)


def test_a_module_in_the_folder_of_the_lists_is_not_imported(tmp_path: Path, monkeypatch: pytest.MonkeyPatch) -> None:
    for name in ("zipfile.py", "csv.py", "instruments.py"):
        (tmp_path / name).write_text("raise SystemExit('imported')\n")
    (tmp_path / "list.csv").write_text("Tag,Service\nPT-1,Feed\n")
    monkeypatch.chdir(tmp_path)
    ((sheet,),) = read_apart([("list.csv", {})])
    assert sheet.rows == [["Tag", "Service"], ["PT-1", "Feed"]]


def test_an_answer_holds_nothing_but_sheets() -> None:
    answer = pickle.dumps([Sheet(file="a", name="b", rows=[[datetime.datetime(2026, 1, 2), 1.0, None]])], protocol=5)  # noqa: DTZ001
    assert reading_process._Answer(io.BytesIO(answer)).load()[0].rows[0][1] == 1.0
    for harmful in (os.system, subprocess.Popen, eval):
        with pytest.raises(pickle.UnpicklingError, match="no answer holds"):
            reading_process._Answer(io.BytesIO(pickle.dumps(harmful, protocol=5))).load()


def test_lists_are_read_apart(monkeypatch: pytest.MonkeyPatch, bad: Path) -> None:
    happen(monkeypatch, "os._exit(9)")
    kinds: tuple[SheetKind, ...] = ()
    with pytest.raises(UnreadableFile, match=r"bad\.csv: cannot be read: the reader did not start or broke off"):
        read_lists([bad], kinds)
