"""One instrument: how it is tagged, ranged, marked, stored, read from a workbook and written to one."""

VERSION = "0.1.0"
