"""Reading a list and writing one: cells, headings, what the rows say, and the user's own workbook marked."""
