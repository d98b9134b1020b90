"""Commands on the kit's own library: cells, templates, the unit file's schema and starting files."""

from __future__ import annotations

import json
from pathlib import Path

import click

__all__ = ["assemble", "cells", "new", "schema"]

KINDS = ("two-winding", "three-winding", "auto", "distribution")


@click.command()
@click.argument("tag", metavar="TAG")
@click.option("--kind", type=click.Choice(KINDS), default="two-winding", show_default=True)
@click.option("--out", metavar="FILE", type=click.Path(path_type=Path), help="Where to write it. [default: TAG.toml]")
def new(tag: str, kind: str, out: Path | None) -> None:
    """Write a commented unit file to start from.

    \b
    Example: throughfault new BV-T9 --kind three-winding
    """
    from throughfault.errors import InputError
    from throughfault.workbook.inputs.starter import starter

    text = starter(kind, tag)
    target = out or Path(f"{tag}.toml")
    try:
        with target.open("x", encoding="utf-8", newline="\n") as file:
            file.write(text)
    except FileExistsError:
        raise InputError(f"{target}: exists already and is left as it is; give another --out.") from None
    except OSError as fault:
        raise InputError(f"{target}: cannot be written ({fault.strerror}).") from None
    click.echo(f"{target}: written; edit it, then: throughfault check {target}")


@click.command()
def schema() -> None:
    """Print the JSON schema of the unit file, for editors that complete and check.

    \b
    Example: throughfault schema > unit.schema.json
    """
    from throughfault.workbook.inputs.schema import json_schema

    click.echo(json.dumps(json_schema(), indent=1, ensure_ascii=False))


@click.command()
@click.option("--cells", "names", metavar="A,B,...", required=True, help="Parts and cells of the library, in order.")
@click.option("--replace", is_flag=True, help="Replace a template of that name.")
@click.argument("name", metavar="NAME")
def assemble(names: str, name: str, *, replace: bool) -> None:
    """Build ./templates/NAME.ipynb from the cell library.

    What every record carries (summary, unit data, verdict, open points, signatures) is added when not named.

    \b
    Example: throughfault assemble --cells requirement,duty,thermal rating-again
    """
    from throughfault.workbook.assemble import write_template

    cells = [cell.strip() for cell in names.split(",") if cell.strip()]
    target = write_template(cells, name, Path("templates"), replace=replace)
    click.echo(f"{target}: written; run it with: throughfault review UNIT.toml --template {target}")


@click.command()
@click.argument("name", metavar="[NAME]", required=False)
def cells(name: str | None) -> None:
    """List the cell library, or show one cell: formula, symbols, units, source, range, checks behind it.

    \b
    Example: throughfault cells average_temperature_copper
    """
    import throughfault.cells
    from throughfault.declare import registry
    from throughfault.errors import InputError, did_you_mean
    from throughfault.render.text import cell_list, cell_text
    from throughfault.workbook.part import PARTS

    _ = throughfault.cells  # importing it declares the library
    known = registry()
    if name is None:
        click.echo(cell_list(list(known.values())))
        click.echo("\nParts of a workbook (for assemble):")
        for part in PARTS.values():
            click.echo(f"  {part.name:<14}{part.title}")
    elif name in known:
        click.echo(cell_text(known[name]))
    elif name in PARTS:
        click.echo(f"{name}: part of a workbook. {PARTS[name].title}.")
    else:
        raise InputError(f"cells: NAME must be a cell of the library, got '{name}'{did_you_mean(name, known)}.")
