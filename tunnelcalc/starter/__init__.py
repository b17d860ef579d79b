"""A starter project: a template of files, and how a folder of it is made."""

from tunnelcalc.starter.folder import PROJECT_FILES, write_starter

__all__ = ["PROJECT_FILES", "write_starter"]
