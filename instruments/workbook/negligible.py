"""What a certificate calls negligible instead of nought."""

from __future__ import annotations

import re
from typing import Final

_NEGLIGIBLE: Final = re.compile(
    r"(?:negl(?:igible|igibly small|igeable)?|vernachl(?:(?:ä|ae)ssigbar(?: klein)?)?|verwaarloosbaar|n[ée]gligeable"
    r"|trascurabile|despreciable)\.?",
    re.IGNORECASE,
)
_FIELDS: Final = frozenset({"ci_nf", "li_uh"})


def is_negligible(field: str, text: str) -> bool:
    """Whether a cell calls an internal capacitance or inductance negligible, which counts as nothing.

    >>> is_negligible("li_uh", "Negligible"), is_negligible("pi_mw", "negligible"), is_negligible("ci_nf", "3")
    (True, False, False)
    """
    return field in _FIELDS and _NEGLIGIBLE.fullmatch(text.strip()) is not None
