"""Text from files on a terminal: what acts upon it, hides or turns round what is beside it is shown by its code."""

from __future__ import annotations

import re
from typing import Final

_ACTS: Final = re.compile(
    "[\x00-\x1f\x7f-\x9f\u00ad\u061c\u200b-\u200f\u2028-\u202e\u2060-\u206f\ufeff\ufff9-\uffff\ud800-\udfff"
    "\U000e0000-\U000e007f]"
)


def for_console(text: str) -> str:
    r"""Return a line as it may be written to a terminal.

    >>> for_console("PT-101"), for_console("PT\x1b[31m-101"), for_console("a\nb")
    ('PT-101', 'PT<U+001B>[31m-101', 'a<U+000A>b')
    """
    return text if text.isascii() and text.isprintable() else _ACTS.sub(lambda found: f"<U+{ord(found[0]):04X}>", text)
