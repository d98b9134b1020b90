"""What every shipped template must be."""

import subprocess
import sys
from pathlib import Path

import nbformat
import pytest

from throughfault.workbook.part import FRAME_AFTER, FRAME_BEFORE, PARTS
from throughfault.workbook.resources import templates_folder
from throughfault.workbook.run import review
from throughfault.workbook.template import TAGS, read_template, shipped_templates

TEMPLATES = sorted(templates_folder().glob("*.ipynb"))
T1 = Path(__file__).parents[1] / "example_reviews" / "BV-T1" / "unit.toml"


@pytest.fixture(params=TEMPLATES, ids=lambda path: path.stem)
def template(request):
    return read_template(request.param)


def test_there_is_the_rating_template():
    """The kit ships the rating template."""
    assert "rating" in shipped_templates()


def test_it_passes_the_guards_and_is_stored_empty(template):
    """No outputs, no arithmetic, one parameters cell, tags of the closed set, imports of one module."""
    assert template.shipped
    for cell in template.notebook.cells:
        assert cell.metadata.tags
        assert set(cell.metadata.tags) <= set(TAGS)
        assert cell.cell_type == "code"
        assert cell.outputs == []


def test_it_has_the_frame_of_a_record(template):
    """Every record has summary, unit data, verdict, open points and signatures."""
    calls = [cell.source for cell in template.notebook.cells]
    assert all(PARTS[name].call in calls for name in (*FRAME_BEFORE, *FRAME_AFTER))


def test_it_runs_with_an_example(template, tmp_path):
    """It makes a record of the 40 MVA unit."""
    assert review(T1, tmp_path, template.name).folder.is_dir()


@pytest.mark.slow
def test_stock_nbconvert_keeps_an_executed_workbook_readable(issued, tmp_path):
    """The plain exporter shows the same parts, with their numbers."""
    command = [
        sys.executable,
        "-m",
        "nbconvert",
        "--to",
        "html",
        "--output-dir",
        str(tmp_path),
        str(issued.folder / "workbook.ipynb"),
    ]
    subprocess.run(command, check=True, capture_output=True)
    page = (tmp_path / "workbook.html").read_text(encoding="utf-8")
    assert "Verdict by ability" in page
    assert nbformat.read(str(issued.folder / "workbook.ipynb"), as_version=4).cells
