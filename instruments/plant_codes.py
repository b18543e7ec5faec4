"""Plant codes: letters on a tag that are no ISA combination but a plant's own name for a kind of thing."""

from __future__ import annotations

import re
from collections.abc import Mapping
from dataclasses import dataclass
from types import MappingProxyType

from instruments.letters import read_letters

__all__ = ["CODES", "PlantCode", "code_for", "codes_with", "read_codes"]


@dataclass(frozen=True, slots=True, kw_only=True)
class PlantCode:
    """One code: the kind it names, in words, and the first letter that its loop goes by (None: not told).

    ``letters`` are ISA letters that say the same, where there are any.
    """

    code: str
    meaning: str
    kind: str
    first: str | None = None
    letters: str | None = None


#: Codes that nearly every plant writes (common practice, no source). None has a first letter: whether
#: SDV-1201 belongs to loop X-1201, SDV-1201 or P-1201 is for each plant to say.
CODES: Mapping[str, PlantCode] = MappingProxyType(
    {
        code: PlantCode(code=code, meaning=meaning, kind=kind, letters=letters)
        for code, meaning, kind, letters in (
            ("SDV", "shutdown valve", "on/off valve", "XV"),
            ("BDV", "blowdown valve", "on/off valve", "XV"),
            ("ESDV", "emergency shutdown valve", "on/off valve", "XV"),
            ("ROV", "remotely operated valve", "on/off valve", "XV"),
            ("MOV", "motor-operated valve", "on/off valve", "XV"),
            ("SOV", "solenoid valve", "solenoid", "XY"),
            ("GD", "gas detector", "gas detector", None),
            ("FD", "fire detector", "fire detector", None),
            ("JB", "junction box", "junction box", None),
            ("DPT", "differential pressure transmitter", "transmitter", "PDT"),
            ("RO", "restriction orifice", "primary element", "FO"),
            ("PVRV", "pressure/vacuum relief valve", "relief valve", "PSV"),
        )
    }
)


def code_for(letters: str, codes: Mapping[str, PlantCode] = CODES) -> PlantCode | None:
    """The plant code that letters are, if they are one.

    Where DPT is known, so are its relatives: DPIT, DPI, DPSH are the PD letters written the other way round.

    >>> code_for("SDV").kind, code_for("DPSHH").letters, code_for("PT")
    ('on/off valve', 'PDSHH', None)
    """
    found = codes.get(letters)
    if found is None and letters[:2] == "DP" and len(letters) > 2 and "DPT" in codes:
        return _differential_relative(letters, codes["DPT"].first)
    return found


def _differential_relative(letters: str, first: str | None) -> PlantCode | None:
    turned = f"PD{letters[2:]}"
    if read_letters(turned).legal == "illegal":
        return None
    return PlantCode(
        code=letters,
        meaning=f"differential pressure, written {turned} by ISA-5.1",
        kind="",
        first=first,
        letters=turned,
    )


def read_codes(text: str) -> dict[str, tuple[str, str]]:
    """Read a plant's codes from one cell: code, kind in words, first letter (may be left out).

    >>> read_codes("SDV = on/off valve, X; GD: gas detector")
    {'SDV': ('on/off valve', 'X'), 'GD': ('gas detector', '')}
    """
    found: dict[str, tuple[str, str]] = {}
    for piece in re.split(r"[;\n]", text):
        code, mark, rest = re.sub(r"[:=]", "=", piece, count=1).partition("=")
        code = code.strip().upper()
        if not mark or not re.fullmatch(r"[A-Z]{1,8}", code):
            continue
        kind, comma, first = rest.rpartition(",")
        if not comma or not re.fullmatch(r"\s*[A-Za-z]\s*", first):
            kind, first = rest, ""
        if kind.strip():
            found[code] = (kind.strip(), first.strip().upper())
    return found


def codes_with(own: Mapping[str, tuple[str, str]]) -> Mapping[str, PlantCode]:
    """The codes that every plant has, and over them a plant's own: code to kind in words and first letter.

    >>> codes_with({"SDV": ("on/off valve", "X")})["SDV"].first
    'X'
    """
    codes = dict(CODES)
    for code, (kind, first) in own.items():
        known = codes.get(code)
        codes[code.upper()] = PlantCode(
            code=code.upper(),
            meaning=known.meaning if known and kind == known.kind else kind,
            kind=kind,
            first=first or None,
            letters=known.letters if known and kind == known.kind else None,
        )
    return MappingProxyType(codes)
