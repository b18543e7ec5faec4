"""The words that stand in cells whatever the column: yes and no, placeholders, ditto marks, rows no longer live."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Mapping
from functools import lru_cache
from typing import Final

YES: Final = frozenset(
    (
        "y", "yes", "✓", "✔", "☑", "√", "x", "1", "●", "•", "■", "ja", "j", "oui", "si", "sí", "true", "wahr",
        "vrai", "t", "on", "yes (y)", "○", "o", "req'd", "required", "ok", "with", "mit", "fitted",
    )
)  # fmt: skip
NO: Final = frozenset(
    (
        "n", "no", "none", "nein", "non", "0", "false", "falsch", "faux", "☐", "off", "✗", "✘", "without", "ohne",
        "not fitted", "not required",
    )
)  # fmt: skip

_FOLDS: Final = str.maketrans(
    {"ä": "ae", "ö": "oe", "ü": "ue", "’": "'", "‘": "'", "–": "-", "—": "-", "−": "-", "‐": "-", "‑": "-"}
)


def folded(text: str) -> str:
    """Return a text as words are compared: one blank between words, no case, umlauts and accents in plain letters.

    >>> folded("  Klemmenkasten\\nFÜHLER – ouverte à gauche ")
    'klemmenkasten fuehler - ouverte a gauche'
    """
    return " ".join((text.lower() if text.isascii() else _plain_letters(text)).split())


@lru_cache(maxsize=16384)
def _plain_letters(text: str) -> str:
    text = unicodedata.normalize("NFKC", text).casefold().translate(_FOLDS)
    if not text.isascii():
        text = "".join(sign for sign in unicodedata.normalize("NFD", text) if not unicodedata.combining(sign))
    return text


_PLAIN_PLACEHOLDERS: Final = {
    "not applicable": (
            "n/a", "n.a.", "na", "n.a", "n / a", "n\\a", "-", "--", "---", "----", ".", "..", "nil", "none",
            "not applicable", "not appl.", "n/r", "not required", "entfaellt", "entf.", "entf", "keine", "/", "//",
            "- -", "_", "__", "k.a.", "k. a.", "keine angabe", "sans objet", "s.o.", "s/o", "n.v.t.",
        ),
    "to be defined": (
            "tba", "tbc", "tbd", "tbn", "t.b.a.", "t.b.c.", "t.b.d.", "t.b.a", "t.b.c", "t.b.d", "later", "?", "??",
            "???", "xxx", "xx", "xxxx", "to be advised", "to be confirmed", "to be defined", "to be determined",
            "to be decided", "unknown", "not known", "pending", "offen", "folgt", "spaeter", "noch offen",
            "wird nachgereicht", "...", "****", "***", "**", "awaited", "to follow", "tbe", "a definir", "*",
        ),
    "by vendor": (
            "vendor", "by vendor", "vta", "vendor to advise", "by supplier", "by others", "by package vendor",
            "as per vendor", "per vendor", "vendor std", "vendor standard", "by manufacturer", "by mfr",
            "by contractor", "by client", "by owner", "by package supplier", "v.t.a.", "bei lieferant",
            "durch lieferant", "bauseits", "vendor scope", "vendor supply", "vendor data", "refer vendor",
        ),
    "on hold": ("hold", "on hold"),
}  # fmt: skip
_PLACEHOLDERS: Final = {text: reason for reason, texts in _PLAIN_PLACEHOLDERS.items() for text in texts}
_HOLD: Final = re.compile(r"(?:on )?hold\s?(?:no\.?|nr\.?|#|-|:)?\s?([0-9]{1,4}[a-z]?)")
_NOTE: Final = re.compile(
    r"\(?(?:see|refer(?: to)?|ref\.?|s\.|siehe|acc\.? to|as per)\s?(?:the )?"
    r"(note|remark|data ?sheet|p&id|bemerkung|datenblatt|hinweis|anmerkung|fussnote|spec|specification)s?\.?\s?"
    r"(?:no\.?|nr\.?|#)?\s?([0-9]{1,3}(?:\s?[,&+]\s?[0-9]{1,3}){0,5})?\)?"
)
_BARE_NOTE: Final = re.compile(r"\(?note\s?(?:no\.?|#)?\s?([0-9]{1,3})\)?")


_MAY_REFER: Final = (
    "hold", "on hold", "see", "refer", "ref", "s.", "siehe", "acc", "as per", "note",
)  # fmt: skip


# Nearly all cells are settled by one look: a digit in a text that does not begin as a reference does.
_A_VALUE: Final = re.compile(
    r"(?!hold|on hold|see|ref|s\.|siehe|acc|as per|note)[0-9a-z][^\n]{0,24}?[0-9]", re.IGNORECASE
)


def is_plainly_a_value(text: str) -> bool:
    """Whether one look tells that a text is no placeholder and no ditto mark; most that are none need a second.

    >>> is_plainly_a_value("PT-1001"), is_plainly_a_value("note 4"), is_plainly_a_value("TBA")
    (True, False, False)
    """
    return _A_VALUE.match(text) is not None


def placeholder(text: str) -> str | None:
    """Return why a cell that holds a placeholder is blank; None where its text is a value.

    >>> placeholder("TBA"), placeholder("HOLD-3"), placeholder("—"), placeholder("See Note 4"), placeholder("BY VENDOR")
    ('to be defined', 'hold 3', 'not applicable', 'see note 4', 'by vendor')
    >>> placeholder("4-20 mA") is None
    True
    """
    if len(text) > 60 or _A_VALUE.match(text):
        return None
    plain = folded(text)
    bare = plain.strip("()[] ")
    reason = _PLACEHOLDERS.get(plain) or _PLACEHOLDERS.get(bare)
    if reason or not bare.startswith(_MAY_REFER):
        return reason
    found = _HOLD.fullmatch(bare)
    if found:
        return f"hold {found[1]}"
    found = _NOTE.fullmatch(plain)
    if found:
        return f"see {found[1]}{' ' + found[2] if found[2] else ''}"
    found = _BARE_NOTE.fullmatch(plain)
    if found:
        return f"see note {found[1]}"
    return None


_DITTO: Final = frozenset(
    (
        '"', "''", "“", "”", "″", "„", "〃", "ditto", "dto", "dto.", "do.", '-"-', '- " -', "-''-", '" "',
        "as above", "same as above", "idem", "wie oben", "wie vor", "s.o", "-do-", "- do -", "do", "as abv", '""',
        "''''",
    )
)  # fmt: skip


def is_ditto(text: str) -> bool:
    """Whether a cell repeats the one above it.

    >>> [is_ditto(text) for text in ('"', "ditto", "-do-", "DO", "do", "as above", '1/2"')]
    [True, True, True, False, True, True, False]
    """
    # DO in capitals is a digital output.
    if len(text) > 16 or text == "DO":
        return False
    return text.lower().strip() in _DITTO or (not text.isascii() and folded(text) in _DITTO)


_STATUS_WORDS: Final[Mapping[str, str]] = {
    word: status
    for status, words in {
        "deleted": (
            "deleted", "removed", "delete", "geloescht", "supprime", "entfallen", "dropped", "entfaellt", "gestrichen",
            "vervallen", "eliminado", "suprimido", "eliminato", "usuniete", "zurueckgezogen", "withdrawn",
        ),
        "void": (
            "void", "voided", "cancelled", "canceled", "not used", "unused", "superseded", "annule", "ungueltig",
            "geannuleerd", "anulado", "annullato", "storniert", "nicht belegt", "nicht verwendet",
        ),
        "spare": ("spare", "reserve", "reserved", "spares", "unassigned"),
        "future": ("future", "for future use", "future use", "zukuenftig", "kuenftig", "futur"),
        "demolished": ("demolished", "decommissioned", "dismantled", "demontiert", "stillgelegt", "scrapped"),
    }.items()
    for word in words
}  # fmt: skip
_STATUS: Final = "|".join(sorted(map(re.escape, _STATUS_WORDS), key=len, reverse=True))
_STATUS_STEM: Final = re.compile(
    "delet|remov|lösch|loesch|suppr|supri|entf[aä]|dropp|void|cancel|used|unus|supers|annul|ungült|ungult|ungueltig|spare|"
    "reserv|gestrich|vervall|elimin|usuni|zurück|zurueck|withdr|geannul|anulad|storn|nicht (?:bel|verw)|"
    "unassig|futur|künft|kuenft|demol|decom|dismant|demont|stillg|scrap",
    re.IGNORECASE,
)
_STATUS_WHOLE: Final = re.compile(
    rf"\W*({_STATUS})\W*(?:(?:in |at |with |by |per |since |mit |in der )?rev(?:ision)?\.? ?\w{{1,3}}"
    r"|row|tag|instrument)?\W*"
)
_STATUS_AT_HEAD: Final = re.compile(
    r"\W*(deleted|voided|void|not used|cancelled|canceled|demolished|spare|future|removed)\s?[-:;,(/].*", re.DOTALL
)
# Spare at the end speaks of the pump: "feed pump B (spare)".
_STATUS_AT_TAIL: Final = re.compile(
    r".*(?:[-:;,]\s?|[(\[]\s?)(deleted|void|voided|not used|cancelled|canceled|demolished|future|removed)\s?[)\].]?",
    re.DOTALL,
)
_SPARE_SIGNAL: Final = re.compile(
    r"\W*(spare|future|reserved?)\s(?:ai|ao|di|do|rtd|tc|input|output|channel|point|signal|core|pair|terminal|slot|"
    r"tag|i/o|analog(?:ue)?|digital|analog(?:ue)? input|digital input|digital output|kanal|loop)s?\b.{0,20}"
)
_STATUS_ANYWHERE: Final = re.compile(rf"(?<!\w)({_STATUS})(?!\w)")


@lru_cache(maxsize=16384)
def not_live(text: str, *, status_column: bool = False) -> str | None:
    """Return deleted, void, spare, future or demolished where a text says that its row is no longer (or not yet) live.

    In a status column the word may stand anywhere. In a service it counts only where it speaks of the row: the
    spare pump's pressure is a live service.

    >>> not_live("SPARE"), not_live("Deleted - see PT-102"), not_live("Feed pressure (FUTURE)"), not_live("Spare AI")
    ('spare', 'deleted', 'future', 'spare')
    >>> not_live("Spare pump discharge"), not_live("Void tank level"), not_live("Deleted in rev C", status_column=True)
    (None, None, 'deleted')
    """
    if len(text) > 200 or _STATUS_STEM.search(text) is None:
        return None
    plain = folded(text)
    found = _STATUS_WHOLE.fullmatch(plain)
    if found is None and status_column:
        found = _STATUS_ANYWHERE.search(plain)
    elif found is None:
        found = _STATUS_AT_HEAD.fullmatch(plain) or _STATUS_AT_TAIL.fullmatch(plain) or _SPARE_SIGNAL.fullmatch(plain)
    return _STATUS_WORDS.get(found[1], "") or None if found else None


def yes_or_no(text: str) -> bool | None:
    """Return what a yes/no cell says; None where its text is neither.

    >>> [yes_or_no(text) for text in ("Yes", "✓", "x", "N", "nein", "4-20 mA")]
    [True, True, True, False, False, None]
    """
    plain = folded(text)
    if plain in YES or text.strip() in YES:
        return True
    if plain in NO or text.strip() in NO:
        return False
    head = plain.split(" ", 1)[0].strip(",;:.-(")
    if head in ("yes", "y", "ja", "oui", "true"):
        return True
    return False if head in ("no", "n", "nein", "non", "false", "not") else None


_BETWEEN: Final = re.compile(r"[^0-9a-z<>=&/.]+")


class Words:
    """A closed set of words and the spellings that mean them."""

    def __init__(self, words: Mapping[str, tuple[str, ...]]) -> None:
        self._whole: dict[str, str] = {}
        self._phrases: list[tuple[str, str]] = []
        for word, spellings in words.items():
            for spelling in (word, *spellings):
                self._whole.setdefault(_spaced(folded(spelling)), word)
        self._phrases = sorted(self._whole.items(), key=lambda each: -len(each[0]))
        self.canonical = tuple(words)

    def find(self, text: str) -> tuple[str, ...]:
        """Return the words that a text means: one where it is clear, none or several where it is not."""
        plain = _spaced(folded(text))
        whole = self._whole.get(plain) or self._whole.get(plain.strip(" ./"))
        if whole is None and len(text) <= 4:
            whole = self._whole.get(plain.replace(".", "").replace("/", ""))
        if whole is not None:
            return (whole,)
        if len(text) > 120:
            return ()
        left = f" {plain.replace('/', ' / ')} ".replace(".", " ")
        left = f" {' '.join(left.split())} "
        found: list[str] = []
        for phrase, word in self._phrases:
            inside = f" {phrase} "
            # A single letter counts only where it is the whole text: "level A" does not mean absolute.
            if len(phrase) > 1 and inside in left:
                left = left.replace(inside, " | ")
                if word not in found:
                    found.append(word)
        return tuple(found)


def _spaced(plain: str) -> str:
    return " ".join(_BETWEEN.sub(" ", plain).split())
