"""sheetgen turns a folder of reviewed records of conducting materials into a reference handbook."""

__version__ = "0.1.0"
