"""The command line: parse, call one function, print."""

from throughfault.cli.main import main

__all__ = ["main"]
