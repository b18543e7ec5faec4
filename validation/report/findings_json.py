"""findings.json: all of an audit for programs, the same bytes for the same lists."""

from __future__ import annotations

import json
import math
from collections.abc import Mapping
from typing import Any

from instruments.quantity import Quantity
from instruments.tag import natural_key
from validation.audit import Audit
from validation.finding import Finding, Outcome
from validation.report.caution import CAUTION


def counts(audit: Audit) -> dict[str, int]:
    """Return the figures of the summary: what was read, and the findings by severity."""
    plant = audit.plant
    lists = plant.lists
    return {
        "tags": sum(1 for each in plant.instruments if each.record.tag),
        "instruments": len(plant.instruments),
        "live": len(plant.live),
        "rows": sum(sheet.rows for sheet in lists.sheets),
        "rows_merged": sum(each.merged_rows - 1 for each in plant.instruments),
        "loops": len(plant.loops),
        "circuits": len(plant.circuits),
        "files": len(lists.files),
        "sheets": len(lists.sheets),
        "cells_filled": sum(sheet.cells_filled for sheet in lists.sheets),
        "cells_read": sum(sheet.cells_read for sheet in lists.sheets),
        "cells_unread": sum(sheet.cells_unread for sheet in lists.sheets),
        "cells_left_out": sum(sheet.cells_filled for sheet in lists.sheets if sheet.skipped),
        **audit.counts(),
        "unchecked": sum(each.count(Outcome.UNCHECKED) for each in audit.coverage.values()),
        "broken": len(audit.broken),
    }


def as_data(
    audit: Audit,
    *,
    digests: Mapping[str, str],
    version: str,
    inputs: Mapping[str, str],
    sheets: Mapping[str, str] | None = None,
) -> dict[str, Any]:
    """Return the audit as plain data.

    Parameters
    ----------
    audit
        What the rules said.
    digests
        Of the other outputs, by file name.
    version
        Ferrule's own.
    inputs
        Digests of the files that were read, by name.
    sheets
        The content marks of the loop sheets, by the loop's number; None where none were drawn.
    """
    plant = audit.plant
    return {
        "audit": {
            "ferrule": version,
            "plant": plant.data.name,
            "files": [{"file": name, "sha256": digest} for name, digest in inputs.items()],
            "rules": [
                {"rule": code, "outcomes_add_up_to": sum(coverage.outcomes.values())}
                for code, coverage in audit.coverage.items()
            ],
            "broken": [{"rule": each.rule, "subject": each.subject, "error": each.error} for each in audit.broken],
            "caution": CAUTION,
        },
        "counts": counts(audit),
        "coverage": [
            {
                "rule": code,
                "clear": each.count(Outcome.CLEAR),
                "finding": each.count(Outcome.FINDING),
                "review": each.count(Outcome.REVIEW),
                "unchecked": each.count(Outcome.UNCHECKED),
                "not_applicable": each.count(Outcome.NOT_APPLICABLE),
                "because": dict(sorted(each.because.items())),
            }
            for code, each in audit.coverage.items()
        ],
        "findings": [finding_data(finding) for finding in audit.findings],
        "unchecked": [
            {"rule": code, "because": list(fields), "subjects": sorted(subjects, key=natural_key)}
            for code, each in audit.coverage.items()
            for fields, subjects in sorted(each.unchecked.items())
        ],
        "assumptions": list(audit.assumptions),
        "outputs": dict(digests),
        **({} if sheets is None else {"sheets": dict(sheets)}),
    }


def finding_data(finding: Finding) -> dict[str, Any]:
    """Return one finding or review as plain data."""
    return {
        "rule": finding.rule,
        "severity": finding.severity.value,
        "outcome": finding.outcome.value,
        "subject": finding.subject,
        "part": finding.part,
        "fields": list(finding.fields),
        "message": finding.message,
        "found": finding.found,
        "wanted": finding.wanted,
        "off_by": finding.off_by,
        "values": {name: _plain(value) for name, value in finding.values.items()},
        "working": finding.working,
        "assumed": list(finding.assumed),
        "fixes": [
            {
                "text": fix.text,
                "change": dict(fix.change),
                "subject": fix.subject or finding.subject,
                "sheet": fix.sheet,
                "makes": list(fix.makes),
            }
            for fix in finding.fixes
        ],
        "cells": [{"file": cell.file, "sheet": cell.sheet, "cell": cell.address} for cell in finding.cells],
    }


def as_text(audit: Audit, **named: Any) -> str:
    """Return findings.json as text that can be written as UTF-8, whatever the lists hold."""
    text = json.dumps(as_data(audit, **named), ensure_ascii=False, indent=1, allow_nan=False) + "\n"
    # Half a character, as in a file's name that is no UTF-8, cannot be written; its escape in JSON can.
    return text.encode("utf-8", "backslashreplace").decode("utf-8")


def _plain(value: Any) -> Any:
    if isinstance(value, float) and not math.isfinite(value):
        return str(value)  # JSON has no word for it
    if isinstance(value, bool | int | float | str) or value is None:
        return value
    if isinstance(value, Quantity):
        return str(value)
    if isinstance(value, list | tuple):
        return [_plain(each) for each in value]
    if isinstance(value, frozenset | set):
        return [_plain(each) for each in sorted(value, key=str)]  # a set has no order of its own
    return str(value)
