"""The commands about the program itself, one a module."""
