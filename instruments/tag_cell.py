"""A cell of a tag column: the several tags that one cell may hold, and the notes that stand beside a tag."""

from __future__ import annotations

import re
from typing import Final

from instruments.letters import letters_stem, read_letters
from instruments.tag_profile import DEFAULT, TagProfile
from instruments.tag_text import latin, tidy

__all__ = ["EQUIPMENT_WORDS", "NOT_TAGS", "split_note", "tags_of_cell"]

#: Words that stand in a tag column and are no tags.
NOT_TAGS: Final = frozenset(
    [
        "SPARE",
        "SPARES",
        "RESERVE",
        "RESERVED",
        "RESERVIERT",
        "VOID",
        "DELETED",
        "DELETE",
        "DEL",
        "CANCELLED",
        "CANCELED",
        "REMOVED",
        "UNUSED",
        "FUTURE",
        "TBA",
        "TBC",
        "TBD",
        "LATER",
        "HOLD",
        "NONE",
        "NIL",
        "NA",
        "NEW",
        "ETC",
        "TOTAL",
        "END",
        "NOTE",
        "NOTES",
        "REV",
        "REVISION",
        "ITEM",
        "UNIT",
        "AREA",
        "ZONE",
        "PAGE",
        "SHEET",
        "LINE",
        "SKID",
        "TRAIN",
        "STAGE",
        "LEVEL",
        "FLOOR",
        "DECK",
        "ROOM",
        "PUMP",
        "TANK",
        "PHASE",
        "PACKAGE",
        "SECTION",
        "SYSTEM",
        "LOOP",
        "TAG",
        "BLATT",
        "SEITE",
        "ANLAGE",
        "ENTFALLEN",
        "FREI",
        "PLATZHALTER",
        "BLANK",
        "OO",
    ]
)

#: Words by which drives, heaters and vessels are called where they have no tag; some would pass for letters.
EQUIPMENT_WORDS: Final = frozenset(
    (
        "PUMP", "PUMPS", "MIXER", "AGITATOR", "STIRRER", "HEATER", "COOLER", "CHILLER", "BOILER", "FURNACE", "MOTOR",
        "DRIVE", "FAN", "BLOWER", "COMPRESSOR", "CONVEYOR", "ELEVATOR", "FEEDER", "CRUSHER", "SCREEN", "SCRAPER",
        "FILTER", "CENTRIFUGE", "DECANTER", "DRYER", "DRIER", "BURNER", "TANK", "VESSEL", "SILO", "HOPPER",
        "EXCHANGER", "COLUMN", "REACTOR", "TURBINE", "GENERATOR", "VALVE", "DAMPER", "PUMPE", "MISCHER",
        "RUEHRWERK", "RÜHRWERK", "RUEHRER", "RÜHRER", "GEBLAESE", "GEBLÄSE", "KESSEL", "BEHAELTER", "BEHÄLTER",
        "VERDICHTER", "VENTILATOR", "LUEFTER", "LÜFTER", "BRENNER", "HEIZER", "HEIZUNG", "POMPE", "MOTEUR", "BOMBA",
    )
)  # fmt: skip

# Words that people write beside a tag: its state, its supplier, which of a motor's or valve's signals it is.
_NOTE_WORDS: Final = frozenset(
    [
        "NEW",
        "NEU",
        "NOUVEAU",
        "NUEVO",
        "EXISTING",
        "EXIST",
        "EXISTG",
        "EXSTG",
        "EX",
        "OLD",
        "ALT",
        "DELETED",
        "DEL",
        "VOID",
        "CANCELLED",
        "CANCELED",
        "REMOVED",
        "REMOVE",
        "RELOCATED",
        "RELOCATE",
        "DEMOLISHED",
        "DEMOLISH",
        "ENTFALLEN",
        "ENTFAELLT",
        "ENTFÄLLT",
        "SPARE",
        "FUTURE",
        "RESERVE",
        "HOLD",
        "TBA",
        "TBC",
        "TBD",
        "NOTE",
        "NOTES",
        "SEE",
        "SIEHE",
        "REV",
        "REVISED",
        "REFER",
        "REF",
        "TYP",
        "TYPICAL",
        "BY",
        "VENDOR",
        "SUPPLIER",
        "OTHERS",
        "CLIENT",
        "OWNER",
        "PACKAGE",
        "NIC",
        "TIE-IN",
        "REPLACED",
        "REPLACE",
        "MODIFIED",
        "CHANGED",
        "ADDED",
        "TEMP",
        "TEMPORARY",
        "MOTHBALLED",
        "OFFLINE",
        "NOT",
        "ISOLATED",
        "OBSOLETE",
        "RUNNING",
        "RUN",
        "STOPPED",
        "STOP",
        "START",
        "STARTED",
        "FAULT",
        "FAULTED",
        "TRIP",
        "TRIPPED",
        "OPEN",
        "OPENED",
        "CLOSE",
        "CLOSED",
        "AVAILABLE",
        "READY",
        "AUTO",
        "MANUAL",
        "REMOTE",
        "LOCAL",
        "HEALTHY",
        "ALARM",
        "FAIL",
        "FAILED",
        "SPEED",
        "CURRENT",
        "AMPS",
        "FEEDBACK",
        "COMMAND",
        "CMD",
        "STATUS",
        "SIGNAL",
        "SETPOINT",
        "OUTPUT",
        "INPUT",
        "ENABLE",
        "ENABLED",
        "RESET",
        "PERMISSIVE",
        "INTERLOCK",
        "TORQUE",
        "POSITION",
        "HIGH",
        "LOW",
        "LAEUFT",
        "STOERUNG",
        "BETRIEB",
        "AUF",
        "ZU",
        "DUTY",
        "STANDBY",
    ]
)

_MARKS: Final = "*#†‡•●▲△?!^~+"
_LEADING = re.compile(rf"^[{re.escape(_MARKS)}'\"`]+ ?")
_TRAILING = re.compile(rf" ?[{re.escape(_MARKS)}'\"`]+$")
_BRACKET = re.compile(r"^(.*[^ ]) ?[(\[{<]([^()\[\]{}<>]*)[)\]}>]?$")
_BRACKET_BEFORE = re.compile(r"^[(\[{<]([^()\[\]{}<>]*)[)\]}>] ?(?=.)")
_BRACKETED_SUFFIX = re.compile(r"[A-Z]{1,2}[0-9]?(?:[/,][A-Z0-9]{1,2})*")

# The bounds keep one cell from becoming thousands of rows: a misread range is likelier than so many devices.
_LONGEST_CELL: Final = 400
_MOST_TAGS: Final = 200
_MOST_BY_HYPHEN: Final = 50

_RANGE = re.compile(r" ?(?:(?<![A-Z])(?:TO|THRU|THROUGH|TILL|UNTIL|BIS|TOT|HASTA)(?![A-Z])|~|\.{2,3}|→) ?")
_LIST = re.compile(r" ?(?:[/,;&+\n]|(?<![A-Z0-9])(?:AND|UND)(?![A-Z0-9])) ?")
_SUFFIX = re.compile(r"[A-Z]{1,2}[0-9]?")
_NUMBER = re.compile(r"([0-9]{1,6})[-./ ]?([A-Z]{1,2}[0-9]?)?")
_LETTERS = re.compile(r"((?:[0-9]{1,4}[A-Z]?[-./ ]?)?)([A-Z]{1,6})")


def split_note(text: str, *, profile: TagProfile = DEFAULT) -> tuple[str, str]:
    """A cell's tag and the note that stands beside it; the note is empty where there is none.

    Only a tag that reads has a note: marks around it, anything in brackets behind it, and the words that
    people write there (its state, its supplier, which signal of a motor or valve it is).

    >>> split_note("PT-1001 (Note 3)"), split_note("PT-1001 NEW"), split_note("PT-1001")
    (('PT-1001', 'Note 3'), ('PT-1001', 'NEW'), ('PT-1001', ''))
    """
    whole = tidy(text)
    if len(whole) > _LONGEST_CELL:
        return whole, ""
    notes: list[str] = []
    tag = whole
    while True:
        for pattern in (_LEADING, _TRAILING):
            found = pattern.search(tag)
            if found and found[0] != tag:
                tag = tag.replace(found[0], "", 1) if found.start() == 0 else tag[: found.start()]
                if found[0].strip(" '\"`"):
                    notes.append(found[0].strip(" '\"`"))
        if profile.parts(latin(tag)[0]):
            return (tag, ", ".join(filter(None, notes))) if tag != whole else (whole, "")
        before = _BRACKET_BEFORE.search(tag)
        if before:
            tag = tag[before.end() :]
            notes.append(before[1].strip())
            continue
        bracket = _BRACKET.search(tag)
        if not bracket or _BRACKETED_SUFFIX.fullmatch(bracket[2].strip().upper()):
            break
        tag = bracket[1]
        notes.append(bracket[2].strip())
    for at in [m.start() for m in re.finditer(r"[ ,:-]", tag)][:12]:
        head, tail = tag[:at], tag[at:].strip(" ,:-")
        word = re.match(r"[^\W\d_]+(?:-[^\W\d_]+)?", tail)
        known = word is not None and (word[0].upper() in _NOTE_WORDS or word[0].upper().split("-")[0] in _NOTE_WORDS)
        if known and profile.parts(latin(head)[0]):
            return head, ", ".join(filter(None, [*notes, tail]))
    if notes and tags_of_cell(latin(tag)[0], profile=profile):
        return tag, ", ".join(filter(None, notes))
    return whole, ""


def tags_of_cell(normalised: str, *, profile: TagProfile = DEFAULT) -> tuple[str, ...]:
    """The tags that one cell means, where it holds two tags, a list or a range; else none.

    >>> tags_of_cell("PT-1001A~C"), tags_of_cell("FIT-0101/0102"), tags_of_cell("LI/LAH-12")
    (('PT-1001A', 'PT-1001B', 'PT-1001C'), ('FIT-0101', 'FIT-0102'), ('LI-12', 'LAH-12'))
    """
    if len(normalised) > _LONGEST_CELL:
        return ()
    parts = profile.parts(normalised)
    if parts is not None and "/" not in parts[3]:
        return ()
    found = _Cell(profile).read(normalised)
    unique = tuple(dict.fromkeys(found))
    return unique if len(unique) > 1 and all(profile.parts(tag) for tag in unique) else ()


class _Tag:
    """One tag of a cell: the text before its letters, its letters, separator, number and suffix."""

    __slots__ = ("head", "letters", "middle", "number", "suffix")

    def __init__(self, head: str, letters: str, middle: str, number: str, suffix: str) -> None:
        self.head, self.letters, self.middle, self.number, self.suffix = head, letters, middle, number, suffix

    def __str__(self) -> str:
        joint = "-" if self.suffix[:1].isdigit() else ""
        return f"{self.head}{self.letters}{self.middle}{self.number}{joint}{self.suffix}"

    def but(self, *, letters: str = "", number: str = "", suffix: str | None = None) -> _Tag:
        return _Tag(
            self.head,
            letters or self.letters,
            self.middle,
            number or self.number,
            self.suffix if suffix is None else suffix,
        )


class _Cell:
    """Reads the pieces of one cell from left to right; each may leave out what it shares with the last."""

    def __init__(self, profile: TagProfile) -> None:
        self.profile = profile

    def read(self, text: str) -> list[str]:
        pieces = self._pieces(text)
        if len(pieces) == 1 and " " in text:
            by_blank = text.split(" ")
            if all(self._whole(piece) for piece in by_blank):
                pieces = [("", piece) for piece in by_blank]
        found: list[_Tag] = []
        waiting: list[str] = []
        for connector, piece in pieces:
            tag = self._whole(piece)
            if tag is None and not found and connector != "range" and _LETTERS.fullmatch(piece):
                waiting.append(piece)
                continue
            if waiting:
                shared = self._share(waiting, piece, tag)
                if not shared:
                    return []
                found, waiting = shared, []
                continue
            new = self._follow(connector, piece, tag, found[-1] if found else None)
            if not new:
                return []
            found += new
            if len(found) > _MOST_TAGS:
                return []
        return [] if waiting else [str(tag) for tag in found]

    @staticmethod
    def _pieces(text: str) -> list[tuple[str, str]]:
        """The pieces with what connects each to the one before: "", "list" or "range"."""
        pieces: list[tuple[str, str]] = []
        connector = ""
        for chunk in _LIST.split(text):
            for at, piece in enumerate(_RANGE.split(chunk)):
                pieces.append(("range" if at else connector, piece.strip()))
            connector = "list"
        return pieces

    def _whole(self, piece: str) -> _Tag | None:
        """A piece that is a tag by itself."""
        parts = self.profile.parts(piece)
        if parts is None or "/" in parts[3] or not parts[1]:
            return None
        prefix, letters, number, suffix = parts
        at = piece.find(letters, len(prefix))
        where = piece.find(number, at + len(letters))
        if at < 0 or where < 0:
            return None
        return _Tag(piece[:at], letters, piece[at + len(letters) : where], number, suffix)

    def _follow(self, connector: str, piece: str, tag: _Tag | None, last: _Tag | None) -> list[_Tag]:
        if last is None:
            return [tag] if tag else self._hyphen_range(piece)
        if connector == "range":
            end = tag or self._short(piece, last)
            return self._between(last, end, most=_MOST_TAGS) if end else []
        if tag and len(tag.letters) == 1 and tag.letters != last.letters:
            # B2 behind PT-1001A is a suffix, not a tag.
            short = self._short(piece, last)
            return [short] if short else [tag]
        if tag:
            if last.head and not tag.head:
                tag.head = last.head
            return [tag]
        short = self._short(piece, last)
        if short:
            return [short]
        letters = _LETTERS.fullmatch(piece)
        if letters and read_letters(letters[2]).legal != "illegal":
            return [last.but(letters=letters[2])]
        return self._hyphen_range(piece)

    def _short(self, piece: str, last: _Tag) -> _Tag | None:
        """A piece that gives only a suffix or a number: B, 1002, 1002B, or the last digits of a number."""
        if last.suffix.isdigit() and re.fullmatch("-?[0-9]{1,2}", piece):
            return last.but(suffix=piece.lstrip("-"))
        if _SUFFIX.fullmatch(piece):
            if len(piece) > 1 and piece.isalpha() and read_letters(piece).legal != "illegal":
                return None
            return last.but(suffix=piece) if last.suffix else None
        number = _NUMBER.fullmatch(piece)
        if number is None:
            return None
        digits, suffix = number[1], number[2] or ""
        if len(digits) < len(last.number):
            digits = last.number[: len(last.number) - len(digits)] + digits
        if len(digits) > len(last.number) + 1 or int(digits) <= int(last.number) - (1 if suffix else 0):
            return None
        return last.but(number=digits, suffix=suffix)

    def _hyphen_range(self, piece: str) -> list[_Tag]:
        """TE-12A-L, PT-1001-1004, PT-1001A-PT-1001C: a hyphen between two ends, not a separator."""
        for hyphen in [m.start() for m in re.finditer("-", piece)][:8]:
            first, rest = self._whole(piece[:hyphen]), piece[hyphen + 1 :]
            if first is None:
                continue
            end = self._whole(rest) or (None if re.fullmatch("[0-9]{1,2}", rest) else self._short(rest, first))
            if end:
                between = self._between(first, end, most=_MOST_BY_HYPHEN)
                if between:
                    return [first, *between]
        return []

    @staticmethod
    def _between(first: _Tag, end: _Tag, *, most: int) -> list[_Tag]:
        """The tags behind the first up to the end; none where the two ends make no range."""
        if end.letters != first.letters or (end.head and end.head != first.head):
            return []
        if end.number == first.number:
            a, b = first.suffix, end.suffix
            if not (len(a) == len(b) == 1 and a.isalpha() and b.isalpha() and a < b):
                return []
            return [first.but(suffix=chr(code)) for code in range(ord(a) + 1, ord(b) + 1)]
        low, high = int(first.number), int(end.number)
        if end.suffix != first.suffix or not low < high <= low + most:
            return []
        width = len(first.number)
        return [first.but(number=f"{number:0{width}d}") for number in range(low + 1, high + 1)]

    def _share(self, waiting: list[str], piece: str, tag: _Tag | None) -> list[_Tag]:
        """LI/LAH-12 and ZSO/C-101: letters that share the number of the tag behind them."""
        if tag is None:
            return []
        first = _LETTERS.fullmatch(waiting[0])
        if first is None:
            return []
        tag.head = tag.head or first[1]
        letters = [first[2]]
        for text in [*waiting[1:], f"{tag.letters}"]:
            more = _LETTERS.fullmatch(text)
            if more is None:
                return []
            letters.append(self._shortened(letters[0], more[2]))
        if any(len(group) < 2 for group in letters):
            return []
        return [tag.but(letters=group) for group in letters]

    @staticmethod
    def _shortened(base: str, letters: str) -> str:
        """Letters that replace the end of the first group: C behind ZSO is ZSC, LL behind LSHH is LSLL."""
        if not re.fullmatch(r"[HLMCORS]{1,3}", letters) and len(letters) > 1:
            return letters
        whole = letters_stem(base) + letters
        if letters_stem(base) != base and read_letters(whole).legal == "legal":
            return whole
        replaced = base[: -len(letters)] + letters
        return replaced if len(replaced) > 1 and read_letters(replaced).legal != "illegal" else letters
