"""Templates assembled from the library."""

import nbformat
import pytest

from throughfault.declare import registry
from throughfault.errors import InputError
from throughfault.workbook.assemble import assemble, template_bytes, write_template
from throughfault.workbook.part import FRAME_AFTER, FRAME_BEFORE, PARTS
from throughfault.workbook.resources import templates_folder
from throughfault.workbook.template import read_template


@pytest.mark.parametrize("path", sorted(templates_folder().glob("*.ipynb")), ids=lambda path: path.stem)
def test_assembling_reproduces_the_committed_template(path):
    """The cell list in a template's metadata gives that template, byte for byte."""
    notebook = nbformat.read(str(path), as_version=nbformat.NO_CONVERT)
    assert template_bytes(assemble(notebook.metadata.throughfault.cells)) == path.read_bytes()


def test_the_frame_of_a_record_is_added():
    """Summary, unit data, verdict, open points and signatures are in every template."""
    calls = [cell.source for cell in assemble(["thermal"]).cells][2:]
    assert calls == [PARTS[name].call for name in (*FRAME_BEFORE, "thermal", *FRAME_AFTER)]


def test_a_cell_of_the_library_becomes_a_calculation():
    """Any formula of the library can be shown."""
    name = next(iter(registry()))
    assert f'tf.calculation(review, "{name}")' in [cell.source for cell in assemble([name]).cells]


def test_unknown_and_repeated_names_are_all_reported():
    """Every fault of the list is in one report."""
    with pytest.raises(InputError) as fault:
        assemble(["thermall", "duty", "duty"])
    assert fault.value.faults == (
        "--cells: must name parts of a workbook or cells of the library, got 'thermall' (did you mean 'thermal'?).",
        "--cells: 'duty' is named twice.",
    )


def test_written_whole_under_its_name(tmp_path):
    """A template is written into the folder and can be read back as a template."""
    target = write_template(["duty"], "mine", tmp_path / "templates")
    assert read_template(target).notebook.metadata.throughfault.cells == ["duty"]
    assert [path.name for path in target.parent.iterdir()] == ["mine.ipynb"]


@pytest.mark.parametrize("name", ["", "../x", "a/b", ".x"])
def test_the_name_is_no_path(name, tmp_path):
    """A name that would leave the folder is refused."""
    with pytest.raises(InputError) as fault:
        write_template(["duty"], name, tmp_path)
    assert str(fault.value) == f"NAME: must be a plain name without folder, got '{name}'."


def test_a_full_disk_leaves_no_half_template(tmp_path, monkeypatch):
    """When writing fails nothing is left under the name, and a sentence says why."""

    def full(self, data):
        self.touch()
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("pathlib.Path.write_bytes", full)
    with pytest.raises(InputError) as fault:
        write_template(["duty"], "mine", tmp_path)
    assert str(fault.value) == f"{tmp_path}/mine.ipynb: cannot be written (No space left on device)."
    assert list(tmp_path.iterdir()) == []


def test_a_template_of_nothing_is_refused(tmp_path):
    """Without a name there is nothing to build."""
    with pytest.raises(InputError) as fault:
        write_template([], "mine", tmp_path)
    assert str(fault.value) == "--cells: must name at least one part of a workbook or cell of the library, got none."
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("name", ["rating", "rating.ipynb"])
def test_the_name_of_a_shipped_template_is_taken(tmp_path, name):
    """A name under which the kit's own template would be found is refused unless asked for."""
    with pytest.raises(InputError) as fault:
        write_template(["duty"], name, tmp_path)
    assert str(fault.value) == (
        "NAME: 'rating' is a template of the kit, which would be found first; take another name "
        "(--replace would write it all the same)."
    )
    assert list(tmp_path.iterdir()) == []
    assert write_template(["duty"], name, tmp_path, replace=True).name == "rating.ipynb"


def test_a_template_is_replaced_only_when_asked(tmp_path):
    """What stands there stays unless it is to be replaced."""
    target = write_template(["duty"], "mine", tmp_path)
    with pytest.raises(InputError) as fault:
        write_template(["thermal"], "mine", tmp_path)
    assert str(fault.value) == f"{target}: exists already; --replace would replace it."
    assert read_template(target).notebook.metadata.throughfault.cells == ["duty"]
    write_template(["thermal"], "mine", tmp_path, replace=True)
    assert read_template(target).notebook.metadata.throughfault.cells == ["thermal"]
