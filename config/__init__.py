"""Settings, bootstrap, and the commands about the program itself."""
