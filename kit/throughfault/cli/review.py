"""Commands on a unit file: check it, review it."""

from __future__ import annotations

import sys
from pathlib import Path

import click

__all__ = ["check", "review"]

UNIT = click.argument("unit", metavar="UNIT.toml", type=click.Path(path_type=Path))


@click.command()
@UNIT
def check(unit: Path) -> None:
    """Validate a unit file and print every fault found.

    Of a valid file: what is open or unusual, the defaults a review would use, and what it could not assess.

    \b
    Example: throughfault check example_reviews/BV-T1/unit.toml
    """
    from throughfault.workbook.outlook import outlook

    found = outlook(unit)
    for line in found.lines:
        click.echo(line)
    click.echo(f"{unit}: valid; {found.summary}.")


@click.command()
@UNIT
@click.option("--template", metavar="NAME", help="Template by name, or the path of one.")
@click.option("--out", metavar="DIR", type=click.Path(path_type=Path), default=Path("records"), show_default=True)
@click.option("--strict", is_flag=True, help="Exit 1 unless the overall verdict is 'withstands'.")
def review(unit: Path, template: str | None, out: Path, *, strict: bool) -> int:
    """Run the workbook on a unit file and write its record.

    The record is DIR/<tag>-<revision>. An unsigned one is replaced once the new one is whole; a
    signed one is refused.

    \b
    Example: throughfault review example_reviews/BV-T1/unit.toml --out records
    """
    from throughfault.render.text import verdict_table
    from throughfault.workbook.run import review as run_review

    issued = run_review(unit, out, template, progress=sys.stderr.isatty())
    click.echo(verdict_table(issued.results))
    click.echo(f"\nRecord: {issued.folder}")
    return int(strict and issued.results["verdicts"]["overall"] != "withstands")
