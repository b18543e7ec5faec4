"""Workbooks broken by chance, through the whole command: a hundred, and each that ever failed."""

from __future__ import annotations

import os
from pathlib import Path

import pytest

from config.bench.audits import Audits, Done
from config.bench.made_list import write_list
from config.bench.mutants import BEYOND_S, mutant, settled, wrong
from tests.hostile.command import ACTS, left, whole

pytestmark = pytest.mark.skipif(os.name != "posix", reason="processes are forked")

ONCE_FAILED: tuple[tuple[int, int], ...] = ()
"""Seed and number of the mutants that the audit once did not take as it should."""


@pytest.fixture(scope="module")
def sound(tmp_path_factory: pytest.TempPathFactory) -> bytes:
    path = tmp_path_factory.mktemp("sound") / "sound.xlsx"
    write_list(path, 12)
    return settled(path.read_bytes())


@pytest.mark.parametrize("ten", range(10))
def test_ten_mutants(audits: Audits, tmp_path: Path, sound: bytes, ten: int) -> None:
    statuses = set()
    for number in range(ten * 10 + 1, ten * 10 + 11):
        folder = tmp_path / str(number)
        folder.mkdir()
        (folder / "mutant.xlsx").write_bytes(mutant(sound, number))
        done = audits.run(folder / "mutant.xlsx", "--to", folder / "out")
        assert wrong(done, own_s=5.0) == "", number
        assert not ACTS.search(done.out + done.err), number
        assert done.peak_mb < 500, number
        assert whole(folder / "out") if done.status == 0 else left(folder / "out") == set(), number
        statuses.add(done.status)
    assert statuses <= {0, 2}


def test_the_mutants_that_once_failed(audits: Audits, tmp_path: Path, sound: bytes) -> None:
    for seed, number in ONCE_FAILED:
        (tmp_path / "mutant.xlsx").write_bytes(mutant(sound, number, seed=seed))
        assert wrong(audits.run(tmp_path / "mutant.xlsx", "--to", tmp_path / "out"), own_s=5.0) == "", (seed, number)


def test_the_sound_list_is_the_same_whenever_it_is_made(tmp_path: Path, sound: bytes) -> None:
    write_list(tmp_path / "again.xlsx", 12)
    assert settled((tmp_path / "again.xlsx").read_bytes()) == sound


def test_a_mutant_is_broken_the_same_way_again_and_another_otherwise(sound: bytes) -> None:
    broken = [mutant(sound, number) for number in range(60)]
    assert broken == [mutant(sound, number) for number in range(60)]
    assert len({sound, *broken}) > 50
    assert mutant(sound, 1, seed=2) != broken[1]


@pytest.mark.parametrize(
    ("done", "why"),
    [
        ({}, ""),
        ({"status": 2, "err": "audit: list.xlsx: is empty.\n", "out": ""}, ""),
        ({"err": 'Traceback (most recent call last):\n  File "x"\nKeyError: 1\n', "status": 1}, "KeyError: 1"),
        ({"late": True, "status": -9}, "took 1.0 s of the processor; the sound file takes 1.0 s"),
        ({"cpu_s": 1.0 + BEYOND_S + 0.1}, "took 6.1 s of the processor; the sound file takes 1.0 s"),
        ({"status": 3, "out": "", "err": "rule RNG01 could not be run"}, "ended with 3: rule RNG01 could not be run"),
        ({"status": -11}, "ended with -11: done"),
        ({"status": 2, "out": "", "err": "audit: a\naudit: b\n"}, "more than one message: audit: a\naudit: b"),
        ({"status": 2, "out": "", "err": "x: stops the reader (SIGABRT)\n"}, "x: stops the reader (SIGABRT)"),
    ],
)
def test_what_is_wrong_with_an_end(done: dict[str, object], why: str) -> None:
    sound_end = {"status": 0, "out": "done", "err": "", "cpu_s": 1.0, "wall_s": 1.0, "peak_mb": 80.0}
    assert wrong(Done(**(sound_end | done)), own_s=1.0) == why  # type: ignore[arg-type]
