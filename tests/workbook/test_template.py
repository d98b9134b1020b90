"""Templates: guarded before anything runs."""

from pathlib import Path

import nbformat
import pytest
from nbformat.v4 import new_code_cell, new_markdown_cell, new_notebook, new_output

from throughfault.errors import TemplateError
from throughfault.workbook.template import find_template, read_template, template_faults

PARAMETERS = new_code_cell('inputs = "inputs"', metadata={"tags": ["parameters"]})


def faults(*cells):
    return template_faults(new_notebook(cells=list(cells)), "t")


def test_a_template_that_only_calls_has_no_faults():
    """Imports of the notebook module, assignments of calls and markdown pass."""
    opening = new_code_cell("from throughfault import notebook as tf\nreview = tf.open_review(inputs)")
    assert faults(PARAMETERS, opening, new_markdown_cell("text", metadata={"tags": ["note"]})) == []


@pytest.mark.parametrize(
    ("cell", "fault"),
    [
        (
            new_code_cell("", metadata={"tags": ["findng"]}),
            "tag must be one of parameters, calculation, finding, note, signature, got 'findng' (did you mean 'finding'?).",
        ),
        (
            new_code_cell("", outputs=[new_output("stream", text="1")]),
            "must be stored without outputs and execution count.",
        ),
        (new_code_cell("", execution_count=3), "must be stored without outputs and execution count."),
        (new_code_cell("x ="), "must be Python, line 1 cannot be read."),
        (new_code_cell("import os"), "may import throughfault.notebook only, got 'import os'."),
        (
            new_code_cell("from throughfault import cells"),
            "may import throughfault.notebook only, got 'from throughfault import cells'.",
        ),
        (
            new_code_cell("y = 2 * x"),
            "a notebook calls and does not compute; '2 * x' belongs in a cell of the library.",
        ),
        (
            new_code_cell("def f():\n    return 1"),
            "a notebook calls and does not compute; 'def f():' belongs in a cell of the library.",
        ),
        (
            new_code_cell("x < 3"),
            "a notebook calls and does not compute; 'x < 3' belongs in a cell of the library.",
        ),
    ],
)
def test_each_fault_is_named_with_its_cell(cell, fault):
    """A fault names the template, the cell and what belongs there."""
    assert faults(PARAMETERS, cell) == [f"t: cell 2: {fault}"]


OPENING = "from throughfault import notebook as tf\nreview = tf.open_review(inputs)\n"


@pytest.mark.parametrize(
    "line",
    [
        '__import__("os").system("true")',
        'open("x", "w")',
        'exec("import os")',
        "print(review)",
        "review",
        "review.unit",
        "review.emit()",
        "tf.Path(inputs)",
        "tf.__class__",
        'tf.__getattribute__("open_review")',
        "tf.throughfault.cells()",
        "tf.summary(review).__class__",
        "tf.summary(tf.open_review(inputs))",
        "tf.summary(*review)",
        "tf.summary(review=review)",
        'tf.summary(f"{review}")',
        "tf.calculation(review, 3)",
        "tf.summary(__builtins__)",
        "tf = tf.open_review(inputs)",
        "tf.summary = review",
        "x = y = tf.summary(review)",
        "_ = tf.summary(review)",
        "x: int = tf.summary(review)",
        "x, y = tf.summary(review)",
        "del review",
        "await review",
        "(x := tf.summary(review))",
    ],
)
def test_whatever_is_no_plain_call_is_refused(line):
    """Nothing of Python is at hand in a template but the calls of the notebook module."""
    assert faults(PARAMETERS, new_code_cell(OPENING + line)) == [
        f"t: cell 2: may call throughfault.notebook only, with names and texts, got '{line.replace(chr(34), chr(39))}'."
    ]


@pytest.mark.parametrize(
    ("line", "fault"),
    [
        (
            "x = [f for f in review]",
            "a notebook calls and does not compute; '[f for f in review]' belongs in a cell of the library.",
        ),
        ("import throughfault.notebook", "may import throughfault.notebook only, got 'import throughfault.notebook'."),
        (
            "from .throughfault import notebook",
            "may import throughfault.notebook only, got 'from .throughfault import notebook'.",
        ),
        ("if review:\n    import os", "may import throughfault.notebook only, got 'import os'."),
        ("%run x.py", "must be Python, line 3 cannot be read."),
        ("\0", "must be Python, "),
    ],
)
def test_each_other_statement_is_refused(line, fault):
    """Computing, importing and the shell's own commands are refused as such."""
    (found,) = faults(PARAMETERS, new_code_cell(OPENING + line))
    assert found.startswith(f"t: cell 2: {fault}")


def test_a_call_needs_the_import_before_it():
    """A name that was not imported is not the notebook module, in whatever cell it stands."""
    call, opening = new_code_cell("tf.summary(review)"), new_code_cell(OPENING)
    assert faults(PARAMETERS, opening, call) == []
    assert faults(PARAMETERS, call, opening) == [
        "t: cell 2: may call throughfault.notebook only, with names and texts, got 'tf.summary(review)'."
    ]


def test_exactly_one_parameters_cell():
    """None or two parameters cells are refused; it holds the one line it must."""
    wrong = new_code_cell('inputs = "inputs"\nx = 3', metadata={"tags": ["parameters"]})
    assert faults() == ["t: must have exactly one code cell tagged 'parameters', has 0."]
    again = new_code_cell(PARAMETERS.source, metadata={"tags": ["parameters"]})
    assert faults(PARAMETERS, again) == ["t: must have exactly one code cell tagged 'parameters', has 2."]
    assert faults(wrong) == ['t: cell 1: the parameters cell must hold the one line inputs = "...".']


def test_unknown_template_names_the_nearest():
    """A misspelt template is refused with the names there are."""
    with pytest.raises(
        TemplateError, match=r"^--template: must be one of .*rating.*, got 'ratng' \(did you mean 'rating'\?\)\.$"
    ):
        find_template("ratng")


def test_what_is_no_notebook_is_refused(tmp_path):
    """Bytes that are no notebook give one sentence."""
    path = tmp_path / "x.ipynb"
    path.write_bytes(b"\xff\xfe")
    with pytest.raises(TemplateError, match=r"^x\.ipynb: must be a notebook \(nbformat 4\.5\), could not be read: "):
        read_template(path)
    path.write_text("{}")
    with pytest.raises(TemplateError, match=r"^x\.ipynb: must be a notebook"):
        read_template(path)


def test_faulty_template_is_refused_with_all_faults(tmp_path):
    """Reading a faulty template raises them all."""
    path = tmp_path / "x.ipynb"
    nbformat.write(new_notebook(cells=[new_code_cell("import os")]), str(path))
    with pytest.raises(TemplateError) as fault:
        read_template(path)
    assert len(fault.value.faults) == 2


def test_a_template_of_ones_own_is_found_by_name(tmp_path, monkeypatch):
    """A template in ./templates is found by its name, one elsewhere by its path."""
    (tmp_path / "templates").mkdir()
    path = tmp_path / "templates" / "own.ipynb"
    nbformat.write(new_notebook(cells=[PARAMETERS]), str(path))
    monkeypatch.chdir(tmp_path)
    assert find_template("own").resolve() == path
    assert not read_template(find_template(str(path))).shipped


@pytest.mark.parametrize(
    ("name", "reason"),
    [("nope", "cannot be read (No such file or directory)"), (".", "is no file")],
)
def test_a_path_that_cannot_be_read_is_refused(name, reason):
    """What is not there, or is a folder, is named in a sentence."""
    with pytest.raises(TemplateError) as fault:
        read_template(Path(name))
    assert str(fault.value) == f"--template: must be the path of a .ipynb file, got {name!r}, which {reason}."
