"""manage.py bench: speed and memory, as ratios in one run on this machine."""

from __future__ import annotations

import json
import subprocess
import sys
import tempfile
import time
from argparse import ArgumentParser
from collections import Counter
from pathlib import Path
from typing import Any

from django.core.management.base import BaseCommand

from config.bench.made_list import write_list
from config.bench.mutants import mutant, settled, tried
from config.bench.stages import audit_stages, bare_read
from instruments.console import for_console


class Command(BaseCommand):
    """Make a list, audit it stage by stage, and read it with openpyxl in the same run for comparison."""

    help = (
        "Makes a list of 50,000 tags and 45 columns, audits it stage by stage and prints what openpyxl's read-only "
        "mode needs merely to read that file. --and N measures a second length; the ratio of both is printed."
    )
    requires_system_checks = ()

    def add_arguments(self, parser: ArgumentParser) -> None:
        """Declare the options."""
        parser.add_argument("--tags", type=int, default=50_000, help="tags of the list")
        parser.add_argument("--and", type=int, dest="second", metavar="N", help="tags of a second, longer list")
        parser.add_argument("--list", metavar="FILE", help="a list of your own instead of a made one")
        parser.add_argument("--mutants", type=int, metavar="N", help="audit N workbooks broken by chance instead")
        parser.add_argument("--seed", type=int, default=1, help="of the mutants: one seed breaks them one way")
        parser.add_argument("--first", type=int, default=1, metavar="N", help="number of the first mutant")
        parser.add_argument("--keep", metavar="DIR", help="a folder for the mutants that the audit did not take well")
        parser.add_argument("--stage", choices=["audit", "bare"], help="measure one stage alone; prints JSON")

    def handle(self, *args: Any, **options: Any) -> None:
        """Measure and print."""
        if options["mutants"]:
            self._mutants(options["mutants"], options["seed"], options["first"], options["list"], options["keep"])
            return
        if options["stage"]:
            measure = audit_stages if options["stage"] == "audit" else bare_read
            self.stdout.write(json.dumps(measure(Path(options["list"]))))
            return
        with tempfile.TemporaryDirectory(prefix="ferrule-bench-") as folder:
            first = self._measure(folder, options["tags"], options["list"])
            if options["second"]:
                second = self._measure(folder, options["second"], None)
                ratio = second["total"] / first["total"]
                self.stdout.write(
                    f"{options['second']:,} tags take {ratio:.2f} times what {options['tags']:,} take "
                    f"({options['second'] / options['tags']:.2f} times the tags)"
                )

    def _mutants(self, count: int, seed: int, first: int, given: str | None, keep: str | None) -> None:
        """Audit mutants, tell of each that is not taken as it should be, and leave with 1 where there is one."""
        ended: Counter[int] = Counter()
        failed = 0
        peak_mb = longest_s = 0.0
        with tempfile.TemporaryDirectory(prefix="ferrule-mutants-") as folder:
            path = Path(given) if given else Path(folder) / "sound.xlsx"
            if not given:
                write_list(path, 40)
            sound = settled(path.read_bytes())
            for number, done, why in tried(sound, range(first, first + count), Path(folder), seed=seed):
                ended[done.status] += 1
                peak_mb, longest_s = max(peak_mb, done.peak_mb), max(longest_s, done.cpu_s)
                if why:
                    failed += 1
                    self.stdout.write(f"mutant {number} of seed {seed}: {for_console(why)}")
                    if keep:
                        Path(keep).mkdir(parents=True, exist_ok=True)
                        (Path(keep) / f"mutant-{seed}-{number}.xlsx").write_bytes(mutant(sound, number, seed=seed))
                if number % 250 == 0:
                    self.stdout.write(f"{number}: {dict(ended)}, {failed} failed, peak {peak_mb:.0f} MB")
        self.stdout.write(
            f"{count:,} mutants: {ended[0]:,} audited, {ended[2]:,} refused, {failed} not taken as they should be; "
            f"longest {longest_s:.1f} s, peak {peak_mb:.0f} MB"
        )
        if failed:
            sys.exit(1)

    def _measure(self, folder: str, tags: int, given: str | None) -> dict[str, float]:
        path = Path(given) if given else Path(folder) / f"made-{tags}.xlsx"
        if not given:
            since = time.perf_counter()
            cells = write_list(path, tags)
            self.stdout.write(f"made {tags:,} tags, {cells:,} cells in {time.perf_counter() - since:.1f} s")
        figures = self._alone("audit", path)
        bare = self._alone("bare", path)
        stages = ("read", "normalise", "assemble", "rules", "fixes", "write", "annotate")
        total = sum(figures[stage] for stage in stages)
        for stage in stages:
            self.stdout.write(f"  {stage:12} {figures[stage]:8.2f} s")
        self.stdout.write(f"  {'audit':12} {total:8.2f} s   peak {figures['peak_mb']:.0f} MB")
        self.stdout.write(f"  {'openpyxl':12} {bare['read']:8.2f} s   peak {bare['peak_mb']:.0f} MB, merely to read it")
        self.stdout.write(f"  audit / bare read {total / bare['read']:.2f}")
        self.stdout.write(
            f"  {figures['instruments']:,.0f} instruments, {figures['loops']:,.0f} loops, "
            f"{figures['findings']:,.0f} findings; one record re-audited in {figures['one_ms']:.3f} ms"
        )
        return {"total": total}

    def _alone(self, stage: str, path: Path) -> dict[str, float]:
        """Measure in a process of its own, so that its peak of memory is its own."""
        command = [sys.executable, sys.argv[0], "bench", "--stage", stage, "--list", str(path)]
        done = subprocess.run(command, capture_output=True, text=True, check=False)
        if done.returncode:
            self.stderr.write(done.stderr[-2000:])
            sys.exit(2)
        figures: dict[str, float] = json.loads(done.stdout)
        return figures
