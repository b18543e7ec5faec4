"""A small audit made by hand, for the tests of the reports: two files, seven sheets, a finding of each sort."""

from collections import Counter
from collections.abc import Sequence
from typing import Any

from instruments.columns import INSTRUMENTS
from instruments.origin import Cell, Origin, Place
from instruments.plant_data import PlantData
from instruments.record import Instrument
from instruments.unit import read_unit
from instruments.workbook.headings import ColumnMatch, SheetMatch
from instruments.workbook.lists import Lists, SheetReport
from instruments.workbook.problem import CellProblem
from loops.plant import assemble
from validation.audit import Audit, Broken, Coverage
from validation.finding import Finding, Fix, Outcome, Severity
from validation.rule import Registry, Subject, rule

RULES = Registry()


@rule("HAZ05", severity=Severity.DANGER, on=Subject.INSTRUMENT, basis="IEC 60079-14:2013, 5.6",
      message="marked {marked}, the area asks for {asked}", needs=("ex_marking", "area.temperature_class"),
      registry=RULES)  # fmt: skip
def hot(subject: Any, plant: Any) -> None:
    """A temperature class weaker than the area's.

    Why it matters: a surface that is hotter than the area
    allows can ignite what it stands in.

    What to do: take a device of the class ``T6``.

    >>> 1 + 1
    2
    """


@rule("RNG02", severity=Severity.FAULT, on=Subject.INSTRUMENT, basis="common practice",
      message="{end} {value} is above {limit}", needs=("lrv|range", "type.url"), registry=RULES)  # fmt: skip
def outside(subject: Any, plant: Any) -> None:
    """A range outside its body's limits."""


@rule("TAG04", severity=Severity.GAP, on=Subject.GROUP, basis="ISA-5.1 (from memory)", message="{tag} does not fit",
      registry=RULES)  # fmt: skip
def misfit(subject: Any, plant: Any) -> None:
    """A tag that does not fit the plant's pattern.

    Why it matters: nobody finds it.
    """


def cell(address_row: int, column: int, sheet: str = "Index", file: str = "in/index.xlsx") -> Cell:
    return Cell(file=file, sheet=sheet, row=address_row, column=column)


def finding(**changed: Any) -> Finding:
    """Return a finding of RNG02 with these differences."""
    values: dict[str, Any] = {
        "rule": "RNG02",
        "severity": Severity.FAULT,
        "outcome": Outcome.FINDING,
        "subject": "PT-101",
        "part": "URV",
        "fields": ("URV", "URL"),
        "message": "URV 20 bar is above 16 bar",
        "values": {"end": "URV", "value": "20 bar", "limit": "16 bar"},
        "cause": "{end} {value} is above {limit}",
        "found": "20 bar",
        "wanted": "at most 16 bar",
        "off_by": "4 bar",
        "working": "20 bar - 16 bar = 4 bar",
        "assumed": (),
        "fixes": (),
        "cells": (cell(7, 21), cell(3, 7, "Types")),
    }
    return Finding(**{**values, **changed})


FINDINGS = (
    finding(
        rule="HAZ05", severity=Severity.DANGER, subject="PT-102", part="", fields=("Ex marking",),
        message="marked T3, the area asks for T4", values={"marked": "T3", "asked": "T4"},
        cause="marked {marked}, the area asks for {asked}", found="T3", wanted="T4", off_by="", working="",
        fixes=(Fix(text="a device marked T4 or better"),), cells=(cell(8, 30), cell(4, 2, "Zones", "in/areas.csv")),
    ),
    finding(
        fixes=(
            Fix(text="range 0 to 16 bar", change={"URV": "16 bar"}),
            Fix(text="device types P40", change={"device type": "P40"}, makes=("RNG03", "RNG08")),
        ),
    ),
    finding(
        rule="TAG04", severity=Severity.GAP, subject="=1+1", part="", fields=("tag",), message="=1+1 does not fit",
        values={"tag": "=1+1"}, cause="{tag} does not fit", found="=1+1", wanted="", off_by="", working="",
        cells=(cell(9, 0),),
    ),
    finding(
        outcome=Outcome.REVIEW, subject="PT-103", assumed=("receiver 250 ohm", "24 V"), fixes=(),
        message="URV 20 bar is above 16 bar, if the reference is gauge",
        cause="{end} {value} is above {limit}, if the reference is gauge",
    ),
)  # fmt: skip

MATCH = SheetMatch(
    kind=INSTRUMENTS,
    header_rows=(1,),
    first_row=2,
    columns={
        "tag": ColumnMatch(column=INSTRUMENTS.column("tag"), index=0, heading="Tag No."),
        "urv": ColumnMatch(
            column=INSTRUMENTS.column("urv"), index=21, heading="Cal. upp", how="likeness", likelihood=0.875,
            unit=read_unit("barg"),
        ),
        "lrv": ColumnMatch(column=INSTRUMENTS.column("lrv"), index=3, heading="From", unit_index=4),
        "area_classification": ColumnMatch(
            column=INSTRUMENTS.column("area_classification"), index=6, heading="Zone", parts=((7, "T"),)
        ),
    },
    unknown=((5, "Colour"),),
    unit_columns=((4, "EU"),),
)  # fmt: skip

SHEETS = (
    SheetReport(
        file="in/index.xlsx", sheet="Index", kind="Instruments", match=MATCH, rows=4, records=4, cells_filled=38,
        cells_read=37, cells_unread=1, sections=((5, "FILTER GALLERY"),), notes=((1, "Rev 3 | checked"),),
        remarks=("1 cell filled from merged cells",),
    ),
    SheetReport(file="in/index.xlsx", sheet="Types", kind="Device types", rows=2, records=2, cells_filled=9,
                cells_read=9),
    SheetReport(file="in/areas.csv", sheet="Zones", skipped="no heading of a known list was found", cells_filled=6),
)  # fmt: skip

PROBLEMS = (
    CellProblem(
        cell=cell(6, 21), field="urv", title="URV", subject="PT-100", text="16 bsr", reason="unit 'bsr' is not known",
        readings=("bar", "psi"),
    ),
    CellProblem(
        cell=cell(3, 3), field="lrv", title="LRV", subject="", text="kg", reason="a mass is no pressure",
        whole_column=True, cells_concerned=1234,
    ),
)  # fmt: skip


def small_plant(*, name: str | None = "Marrowbeck Works", **lists: Any) -> Any:
    """Return a plant of four rows, one of them void."""
    place = Place(file="in/index.xlsx", sheet="Index", columns={"tag": (0,)})
    rows = [("PT-101", None), ("PT-102", None), ("PT-103", None), ("PT-104", "void")]
    records = tuple(
        Instrument(tag=tag, tag_written=tag, status=status, origin=Origin(place=place, row=row))
        for row, (tag, status) in enumerate(rows, start=7)
    )
    values: dict[str, Any] = {
        "records": {"Instruments": records},
        "problems": PROBLEMS,
        "sheets": SHEETS,
        "plant": PlantData(name=name),
        "files": ("in/index.xlsx", "in/areas.csv"),
        "index_file": "index.xlsx",
        "index_columns": frozenset({"tag"}),
    }
    return assemble(Lists(**{**values, **lists}))


def coverage(code: str, *outcomes: int, unchecked: dict[tuple[str, ...], list[str]] | None = None) -> Coverage:
    """Return a rule's coverage: the five outcomes in their order, and who was unchecked for want of what."""
    made = Coverage(rule=code, outcomes=Counter(dict(zip(Outcome, outcomes, strict=True))))
    for fields, subjects in (unchecked or {}).items():
        made.unchecked[fields] = subjects
        made.because.update({field: len(subjects) for field in fields})
    return made


def small_audit(findings: Sequence[Finding] = FINDINGS, **plant: Any) -> Audit:
    """Return an audit of the small plant."""
    return Audit(
        plant=small_plant(**plant),
        findings=list(findings),
        coverage={
            "HAZ05": coverage("HAZ05", 0, 1, 0, 1, 2, unchecked={("area temperature class",): ["PT-103"]}),
            "RNG02": coverage(
                "RNG02", 0, 1, 1, 2, 0, unchecked={("URL",): ["PT-102"], ("LRV or range", "URL"): ["PT-104"]}
            ),
            "TAG04": coverage("TAG04", 2, 1, 0, 0, 1),
        },
        broken=[Broken("RNG05", "PT-102", "ZeroDivisionError: float division by zero")],
        assumptions=("most tags fit isa-hyphen", "receiver 250 ohm"),
    )
