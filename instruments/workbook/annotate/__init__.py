"""A copy of a workbook with some of its cells filled and commented, and everything else as it was."""
