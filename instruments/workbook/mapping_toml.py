"""mapping.toml: a mapping as a text that a person mends, written plainly and read with care."""

from __future__ import annotations

import os
import re
import textwrap
import tomllib
from collections import defaultdict
from collections.abc import Iterator, Sequence
from typing import Any, Final, NoReturn

from rapidfuzz import fuzz, process

from instruments.column import Column, SheetKind
from instruments.origin import column_letters
from instruments.workbook.delimited import ENCODINGS, SEPARATORS
from instruments.workbook.heading_words import heading_words, unit_for
from instruments.workbook.mapping import LEAVE_OUT, NOT_READ, MappedColumn, MappedSheet, Mapping
from instruments.workbook.sheet import MAX_COLUMNS, MAX_ROWS, UnreadableFile, column_number
from instruments.workbook.words import folded

__all__ = ["mapping_text", "read_mapping"]

MOST_BYTES: Final = 2 << 20
"""A sheet of 60 columns takes 6,000; what is larger than this was not written here."""

_NONE: Final = "none"
_NOT_READ: Final = "not read"
_CELL: Final = re.compile(r"([A-Z]{1,3})([1-9][0-9]{0,6})?")
_UNIT_OF: Final = re.compile(r"unit of ([A-Z0-9]{1,7}(?: ?, ?[A-Z0-9]{1,7}){0,200})", re.IGNORECASE)
_LETTERS: Final = re.compile(r"[A-Z]{1,3}")
_MARKS: Final = ("", ".", ",")
_OF_SHEET: Final = (
    "file", "sheet", "read_as", "why", "encoding", "separator", "heading_rows", "heading_columns",
    "decimal_sign", "columns",
)  # fmt: skip
_OF_COLUMN: Final = (
    "cell", "heading", "field", "unit", "part", "before", "only", "decimal_sign", "how", "likely",
)  # fmt: skip

_HEAD: Final = """\
How Ferrule read these lists. Where it is wrong, mend it here and give it back, with the same lists or with their next revision:

    python3 manage.py audit LIST ... --to DIR --mapping mapping.toml

read_as       what the sheet is, or "leave out"; "not read" is tried again. Known are: {kinds}.
heading_rows  the rows of the headings, as the spreadsheet counts them. Put others, and the columns may be deleted.
decimal_sign  "." or ","; "" where no number tells. On a column: where it is not the sheet's.
cell          where the heading stood. A heading is found again by its words, wherever it stands then.
field         one of the fields listed at the end, or "none": the column is kept under its heading, and no rule reads it. ["design pressure", "design temperature"]: both stand in each cell, in this order. "unit of C, D": it holds the units of these columns.
unit          the unit of the column; "" for none. Without it, what the heading says.
part, before  the field (the last one) stands in several columns, and this is which of them; what to write before each cell.
only          the first letter of the tags that the column speaks of.
how, likely   how the field was found. What is found in this file is not guessed again (how = "mapping").

What fits nothing in the lists any more is told with its line; so is a column or a sheet that is new."""  # noqa: E501


# --- writing --------------------------------------------------------------------------------------------------------


def mapping_text(mapping: Mapping, kinds: Sequence[SheetKind]) -> str:
    """Return a mapping as TOML 1.0, with what a person must know to mend it.

    Parameters
    ----------
    mapping
        How lists were understood.
    kinds
        The kinds of sheet that are known, whose fields are listed at the end.
    """
    known = {kind.name: kind for kind in kinds}
    lines = [
        f"# {each}".rstrip()
        for line in _HEAD.format(kinds=", ".join(known)).splitlines()
        for each in textwrap.wrap(line, 117, subsequent_indent=" " * 14 if line[12:14] == "  " else "") or [""]
    ]
    for sheet in mapping.sheets:
        lines.append("")
        lines.extend(_sheet_lines(sheet, known.get(sheet.kind)))
    used = dict.fromkeys(sheet.kind for sheet in mapping.sheets if sheet.kind in known)
    for name in used:
        titles = "; ".join(column.title for column in known[name].columns)
        lines.append("")
        lines.extend(f"# {line}" for line in textwrap.wrap(f"The fields of {name}: {titles}.", 117))
    return "\n".join(lines) + "\n"


def _sheet_lines(sheet: MappedSheet, kind: SheetKind | None) -> Iterator[str]:
    yield "[[sheet]]"
    yield f"file = {_text(sheet.file)}"
    yield f"sheet = {_text(sheet.sheet)}"
    yield f"read_as = {_text(sheet.kind or _NOT_READ)}"
    if sheet.why:
        yield f"why = {_text(sheet.why)}"
    if sheet.encoding:
        yield f"encoding = {_text(sheet.encoding)}"
    if sheet.separator:
        yield f"separator = {_text(sheet.separator)}"
    if kind is None:
        return
    if not sheet.heading_rows:
        yield "heading_rows = []  # a field and its value on each row"
        return
    if sheet.turned:
        shown = ", ".join(_text(column_letters(row)) for row in sheet.heading_rows)
        yield f"heading_columns = [{shown}]  # its tags stand side by side: each line is read as a column"
    else:
        yield f"heading_rows = [{', '.join(str(row + 1) for row in sheet.heading_rows)}]"
    yield f"decimal_sign = {_text(sheet.decimal)}"
    titles = {column.field: column.title for column in kind.columns}
    rows = [_entry(column, titles, turned=sheet.turned) for column in sheet.columns]
    widths = [min(max((len(row[at]) for row in rows), default=0), limit) for at, limit in enumerate((14, 44, 40))]
    yield "columns = ["
    for *first, rest in rows:
        start = " ".join(text.ljust(width) for text, width in zip(first, widths, strict=True))
        yield f"  {{ {start} {rest} }}," if rest else f"  {{ {start.rstrip()} }},"
    yield "]"


def _entry(column: MappedColumn, titles: dict[str, str], *, turned: bool) -> tuple[str, str, str, str]:
    """Return an entry in pieces: cell, heading, field, and what there may be beside."""
    if turned:
        cell = f"{column_letters(column.row or 0)}{column.index + 1}"
    else:
        cell = column_letters(column.index) + ("" if column.row is None else str(column.row + 1))
    names = [titles.get(name, name) for name in column.fields]
    if column.unit_of:
        names.append(f"unit of {', '.join(str(at + 1) if turned else column_letters(at) for at in column.unit_of)}")
    field = f"[{', '.join(map(_text, names))}]" if len(names) > 1 else _text(names[0] if names else _NONE)
    beside: list[str] = []
    if column.units is not None:
        several = len(column.units) > 1
        texts = ", ".join(map(_text, column.units))
        beside.append(f"unit = {f'[{texts}]' if several else texts}")
    if column.part:
        beside.append(f"part = {column.part}")
    if column.before:
        beside.append(f"before = {_text(column.before)}")
    if column.only:
        beside.append(f"only = {_text(column.only)}")
    if column.decimal:
        beside.append(f"decimal_sign = {_text(column.decimal)}")
    if column.how:
        beside.append(f"how = {_text(column.how)}")
    if column.likelihood is not None:
        beside.append(f"likely = {column.likelihood:.2f}")
    return (
        f"cell = {_text(cell)},",
        f"heading = {_text(column.heading)},",
        f"field = {field}{',' if beside else ''}",
        ", ".join(beside),
    )


def _text(text: str) -> str:
    r"""Return a text as a basic string of TOML 1.0, everything that does not show escaped.

    >>> print(_text('1/2" \\ \t\u202eX'))
    "1/2\" \\ \t\u202EX"
    """
    written: list[str] = []
    for sign in text:
        if sign in '"\\':
            written.append(f"\\{sign}")
        elif sign.isprintable():
            written.append(sign)
        elif sign in _SHORT:
            written.append(_SHORT[sign])
        elif "\ud800" <= sign <= "\udfff":
            written.append("\ufffd")  # half a character is no text, in TOML or anywhere
        else:
            written.append(f"\\u{ord(sign):04X}" if ord(sign) < 0x10000 else f"\\U{ord(sign):08X}")
    return f'"{"".join(written)}"'


_SHORT: Final = {"\t": "\\t", "\n": "\\n", "\r": "\\r"}


# --- reading --------------------------------------------------------------------------------------------------------


def read_mapping(path: str | os.PathLike[str], kinds: Sequence[SheetKind]) -> Mapping:
    """Read a mapping.toml.

    Parameters
    ----------
    path
        The file.
    kinds
        The kinds of sheet that are known.

    Raises
    ------
    UnreadableFile
        There is no such file, it is no TOML, or it says what cannot be meant; says in which line.
    """
    file = os.fspath(path)
    try:
        with open(path, "rb") as stream:
            source = stream.read(MOST_BYTES + 1)
        if len(source) > MOST_BYTES:
            raise UnreadableFile(file, "", f"is larger than {MOST_BYTES:,} bytes, as no mapping is")
        text = source.decode("utf-8-sig")
        found = tomllib.loads(text)
    except UnreadableFile:
        raise
    except FileNotFoundError:
        raise UnreadableFile(file, "", "there is no such file") from None
    except OSError as error:
        raise UnreadableFile(file, "", f"cannot be opened ({error.strerror})") from None
    except UnicodeDecodeError:
        raise UnreadableFile(file, "", "is not text in UTF-8") from None
    except tomllib.TOMLDecodeError as error:
        raise UnreadableFile(file, "", f"is not TOML ({error})") from None
    except (RecursionError, ValueError):
        raise UnreadableFile(file, "", "is not TOML that can be read") from None
    return _Reader(file, text, kinds).mapping(found)


class _Reader:
    def __init__(self, file: str, text: str, kinds: Sequence[SheetKind]) -> None:
        self.file = file
        self.kinds = {kind.name: kind for kind in kinds}
        self.lines = list(_lines(text))
        self.line = 0
        self.entry = ""

    def _refuse(self, reason: str) -> NoReturn:
        place = f"line {self.line}" if self.line else ""
        raise UnreadableFile(self.file, f"{place}, {self.entry}" if place and self.entry else place, reason)

    def mapping(self, found: dict[str, Any]) -> Mapping:
        self._known_keys(found, ("sheet",))
        sheets = found.get("sheet", [])
        if not isinstance(sheets, list) or not all(isinstance(each, dict) for each in sheets):
            self._refuse("'sheet' is not a table: each begins with [[sheet]]")
        if not sheets:
            self._refuse("says nothing of any sheet: each begins with [[sheet]]")
        read = tuple(self._sheet(number, each) for number, each in enumerate(sheets))
        seen: dict[tuple[str, str], list[MappedSheet]] = {}
        for each in read:
            before = seen.setdefault((folded(each.file), folded(each.sheet)), [])
            # A page of tags may stand below another on one sheet, and a table beside another.
            if before and not each.turned and not all(_stands_beside(each, other) for other in before):
                self.line, self.entry = each.line, ""
                self._refuse(f"{each.file}, sheet '{each.sheet}' stands in line {before[-1].line} already")
            before.append(each)
        return Mapping(sheets=read, source=self.file)

    # --- a sheet --------------------------------------------------------------------------------------------------

    def _sheet(self, number: int, told: dict[str, Any]) -> MappedSheet:
        line, lines = self.lines[number] if number < len(self.lines) else (0, [])
        self.line, self.entry = line, "[[sheet]]"
        self._known_keys(told, _OF_SHEET)
        file = self._string(told, "file")
        if not file:
            self._refuse("'file' is missing: the name of the list")
        sheet = self._string(told, "sheet")
        self.entry = f"{file}, sheet '{sheet}'"
        kind = self._kind(self._string(told, "read_as", _NOT_READ))
        encoding = self._one_of(told, "encoding", ("", *ENCODINGS))
        separator = self._one_of(told, "separator", ("", *SEPARATORS))
        decimal = self._one_of(told, "decimal_sign", _MARKS)
        turned = "heading_columns" in told
        if turned and "heading_rows" in told:
            self._refuse("has heading_rows and heading_columns: the one for a list, the other for tags side by side")
        rows = self._rows(self._numbers(told["heading_columns"]) if turned else told.get("heading_rows", []))
        columns: tuple[MappedColumn, ...] = ()
        entries = told.get("columns", [])
        if not isinstance(entries, list) or not all(isinstance(each, dict) for each in entries):
            self._refuse("'columns' is not a list of { cell = ..., heading = ..., field = ... }")
        if kind in self.kinds:
            if entries and not rows:
                self._refuse("has columns, and no 'heading_rows' that they stand under")
            columns = tuple(
                self._column(each, lines[at] if at < len(lines) else line, self.kinds[kind], file, sheet, turned)
                for at, each in enumerate(entries)
            )
            self._contradictions(columns, self.kinds[kind], file, sheet)
        return MappedSheet(
            file=file,
            sheet=sheet,
            kind=kind,
            why=self._string(told, "why") if kind not in self.kinds else "",
            heading_rows=rows,
            decimal=decimal,
            encoding=encoding,
            separator=separator,
            turned=turned,
            columns=columns,
            line=line,
        )

    def _kind(self, text: str) -> str:
        plain = folded(text)
        if plain in ("", _NOT_READ, "not understood"):
            return NOT_READ
        if plain in (LEAVE_OUT, "left out", "nothing", _NONE):
            return LEAVE_OUT
        found = next((name for name in self.kinds if folded(name) == plain), None)
        if found is None:
            self._refuse(f"read_as: there is no kind of sheet '{text}'; {_nearest(text, [*self.kinds, LEAVE_OUT])}")
        return found

    def _numbers(self, told: Any) -> list[int]:
        """Return columns by number, counted from 1."""
        letters = [told] if isinstance(told, str) else told
        if not isinstance(letters, list) or not all(
            isinstance(each, str) and _LETTERS.fullmatch(each) for each in letters
        ):
            self._refuse(f'heading_columns is no list of columns, such as ["B"]: {_shown(told)}')
        return [column_number(each) + 1 for each in letters]

    def _rows(self, told: Any) -> tuple[int, ...]:
        rows = [told] if isinstance(told, int) else told
        if not isinstance(rows, list) or not all(type(row) is int and 1 <= row <= MAX_ROWS for row in rows):
            self._refuse(f"heading_rows is no list of rows, such as [5] or [5, 6]: {_shown(told)}")
        if not rows:
            return ()
        rows = sorted(rows)
        if rows != list(range(rows[0], rows[0] + len(rows))) or len(rows) > 4:
            self._refuse(f"heading_rows are at most four rows, one below the other: {_shown(told)}")
        return tuple(row - 1 for row in rows)

    # --- a column -------------------------------------------------------------------------------------------------

    def _column(
        self, told: dict[str, Any], line: int, kind: SheetKind, file: str, sheet: str, turned: bool
    ) -> MappedColumn:
        self.line, self.entry = line, f"{file}, sheet '{sheet}'"
        heading = self._string(told, "heading")
        self.line, self.entry = line, f"heading '{heading}' of {file}, sheet '{sheet}'"
        self._known_keys(told, _OF_COLUMN)
        cell = _CELL.fullmatch(self._string(told, "cell"))
        if cell is None or column_number(cell[1]) >= MAX_COLUMNS or (turned and not cell[2]):
            self._refuse(f"cell is no cell such as C5: {_shown(told.get('cell', 'missing'))}")
        fields, unit_of = self._fields(told.get("field", _NONE), kind)
        part = told.get("part", 0)
        if type(part) is not int or not 0 <= part <= 20:
            self._refuse(f"part is a number, 1 for the first: {_shown(part)}")
        if part and len(fields) not in (1, 2):
            self._refuse("part is for a column that holds a part of one field, the last that it names")
        only = self._string(told, "only")
        if only and not re.fullmatch("[A-Za-z]", only):
            self._refuse(f"only is one letter, with which tags begin: {_shown(only)}")
        likelihood = told.get("likely")
        column, row = column_number(cell[1]), int(cell[2]) - 1 if cell[2] else None
        return MappedColumn(
            index=row if turned and row is not None else column,
            row=column if turned else row,
            heading=heading,
            fields=tuple(column.field for column in fields),
            units=self._units(told["unit"], fields) if "unit" in told else None,
            unit_of=unit_of,
            part=part,
            before=self._string(told, "before"),
            only=only.upper(),
            decimal=self._one_of(told, "decimal_sign", _MARKS),
            how=self._string(told, "how"),
            likelihood=float(likelihood) if isinstance(likelihood, int | float) else None,
            line=line,
        )

    def _fields(self, told: Any, kind: SheetKind) -> tuple[list[Column], tuple[int, ...]]:
        texts = [told] if isinstance(told, str) else told
        if not isinstance(texts, list) or not all(isinstance(text, str) for text in texts):
            self._refuse(f"field is a title, or several in a list: {_shown(told)}")
        fields: list[Column] = []
        unit_of: tuple[int, ...] = ()
        for text in texts:
            if folded(text) in ("", _NONE, "-"):
                continue
            speaks_for = _UNIT_OF.fullmatch(text.strip())
            if speaks_for is not None:
                unit_of += tuple(self._line_or_column(each.strip().upper()) for each in speaks_for[1].split(","))
                continue
            fields.append(self._field(text, kind))
        if len({column.field for column in fields}) < len(fields):
            self._refuse(f"field names one field twice: {_shown(told)}")
        return fields, unit_of

    def _line_or_column(self, text: str) -> int:
        if text.isascii() and text.isdecimal() and int(text):
            return int(text) - 1
        if not _LETTERS.fullmatch(text):
            self._refuse(f"'{text}' is no column, such as C")
        return column_number(text)

    def _field(self, text: str, kind: SheetKind) -> Column:
        plain = folded(text)
        for column in kind.columns:
            if plain in (folded(column.title), folded(column.field), folded(column.field.replace("_", " "))):
                return column
        words = heading_words(text)
        alike = [
            column
            for column in kind.columns
            if words and any(heading_words(each) == words for each in (column.title, *column.headings))
        ]
        if len(alike) == 1:
            return alike[0]
        titles = [column.title for column in kind.columns]
        if not alike:
            self._refuse(f"{kind.name} has no field '{text}'; {_nearest(text, titles)}")
        return self._refuse(f"'{text}' may be {' or '.join(column.title for column in alike)}")

    def _units(self, told: Any, fields: Sequence[Column]) -> tuple[str, ...]:
        texts = [told] if isinstance(told, str) else told
        if not isinstance(texts, list) or not all(isinstance(text, str) for text in texts):
            self._refuse(f"unit is a text, or one for each field in a list: {_shown(told)}")
        if len(texts) == 1:
            texts = texts * len(fields)
        if len(texts) != len(fields):
            self._refuse(f"unit has {len(texts)} units for {len(fields)} fields")
        for text, column in zip(texts, fields, strict=True):
            if text and unit_for(column, text) is None:
                self._refuse(f"'{text}' is no unit that {column.title} can be in")
        return tuple(texts)

    def _contradictions(self, columns: Sequence[MappedColumn], kind: SheetKind, file: str, sheet: str) -> None:
        """Refuse two columns for one field, and two entries for one column."""
        known = {column.field: column for column in kind.columns}
        cells: dict[int, MappedColumn] = {}
        owners: dict[str, list[tuple[MappedColumn, int]]] = defaultdict(list)
        for column in columns:
            self.line, self.entry = column.line, f"heading '{column.heading}' of {file}, sheet '{sheet}'"
            before = cells.setdefault(column.index, column)
            if before is not column:
                self._refuse(f"this column stands in line {before.line} already")
            for name in column.fields:
                owners[name].append((column, column.part if name == column.fields[-1] else 0))
        for name, entries in owners.items():
            (first, _), (last, _) = entries[0], entries[-1]
            self.line, self.entry = last.line, f"heading '{last.heading}' of {file}, sheet '{sheet}'"
            parts = {part for _, part in entries}
            if len(entries) > 1 and (0 in parts or len(parts) < len(entries)):
                self._refuse(
                    f"{known[name].title} is read from column {column_letters(first.index)} ('{first.heading}', "
                    f"line {first.line}) already; of a field in several parts each has its part = 1, 2 ..."
                )
            for each in known[name].into:
                if each in owners and known[name].reads.value == "range":
                    other, _ = owners[each][-1]
                    self._refuse(
                        f"{known[name].title} holds {known[each].title} too, which is read from column "
                        f"{column_letters(other.index)} ('{other.heading}', line {other.line})"
                    )

    # --- values ---------------------------------------------------------------------------------------------------

    def _known_keys(self, told: dict[str, Any], known: Sequence[str]) -> None:
        for key in told:
            if key not in known:
                self._refuse(f"'{key}' means nothing here; {_nearest(key, known)}")

    def _string(self, told: dict[str, Any], name: str, default: str = "") -> str:
        value = told.get(name, default)
        if not isinstance(value, str):
            self._refuse(f"{name} is no text in quotation marks: {_shown(value)}")
        return value

    def _one_of(self, told: dict[str, Any], name: str, known: Sequence[str]) -> str:
        text = self._string(told, name)
        found = next((each for each in known if each.casefold() == text.casefold()), None)
        if found is None:
            self._refuse(f"{name} is one of {', '.join(map(_text, known))}, not {_text(text)}")
        return found


def _stands_beside(one: MappedSheet, other: MappedSheet) -> bool:
    """Whether two tables of one sheet have no column in common."""
    columns = [{column.index for column in each.columns} for each in (one, other)]
    return all(columns) and columns[0].isdisjoint(columns[1])


def _nearest(text: str, known: Sequence[str]) -> str:
    """Return what a name that is not known may have been meant for."""
    found = process.extract(folded(text), {name: folded(name) for name in known}, scorer=fuzz.WRatio, limit=3)
    near = [name for _, score, name in found if score >= 60]
    return f"the nearest: {', '.join(near)}" if near else f"known: {', '.join(known[:12])}"


def _shown(value: object) -> str:
    text = str(value)
    return text if len(text) <= 60 else f"{text[:60]}..."


# --- lines ----------------------------------------------------------------------------------------------------------

_HEADER: Final = re.compile(r"\[\[\s*[\"']?(\w+)[\"']?\s*(\.\s*[\"']?columns[\"']?\s*)?\]\]")
_TOKEN: Final = re.compile(
    r'(?P<comment>#[^\n]*)|(?P<text>"""(?:[^"\\]|\\[\s\S]|"(?!""))*"""|\'\'\'(?:[^\']|\'(?!\'\'))*\'\'\''
    r"|\"(?:[^\"\\\n]|\\.)*\"|'[^'\n]*')|(?P<sign>[\[\]{}\n])"
)


def _lines(text: str) -> Iterator[tuple[int, list[int]]]:
    """Yield for each [[sheet]] its line and the lines of its columns: the reader of TOML tells none."""
    sheet: tuple[int, list[int]] | None = None
    line, depth, fresh = 1, 0, 0
    for token in _TOKEN.finditer(text):
        sign = token["sign"]
        if sign is None:
            line += token[0].count("\n")
        elif sign == "\n":
            line += 1
            fresh = token.end()
        elif sign == "[" and not depth and not text[fresh : token.start()].strip():
            name = re.match(
                r"\[\[\s*[\"']?(\w+)[\"']?\s*(\.\s*[\"']?columns[\"']?\s*)?\]\]", text[token.start() :][:80]
            )
            if name is not None and name[1] == "sheet" and not name[2]:
                if sheet is not None:
                    yield sheet
                sheet = (line, [])
            elif name is not None and sheet is not None:
                sheet[1].append(line)
            depth += 1
        elif sign in "[{":
            if sign == "{" and depth == 1 and sheet is not None:
                sheet[1].append(line)
            depth += 1
        else:
            depth -= 1
    if sheet is not None:
        yield sheet
