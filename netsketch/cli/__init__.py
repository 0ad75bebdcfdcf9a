"""The commands: the window's answers without a screen, one module a command."""
