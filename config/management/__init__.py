"""Where Django looks for the commands about the program itself."""
