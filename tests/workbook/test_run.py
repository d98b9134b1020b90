"""Running a review: whole records or nothing, the same bytes every time."""

import json
import os
import re
import signal
import subprocess
import sys
from pathlib import Path

import nbformat
import pytest
from nbformat.v4 import new_code_cell, new_notebook

from throughfault.errors import RecordError, RunError, TemplateError, UnitFileError
from throughfault.render.record import data_ids, lint, loose_digits
from throughfault.workbook import run
from throughfault.workbook.results import lookup, read_results
from throughfault.workbook.run import default_template, review
from throughfault.workbook.verify import verify

EXAMPLES = (Path(__file__).parents[2] / "example_reviews").resolve()
T1 = EXAMPLES / "BV-T1" / "unit.toml"
FILES = {"SHA256SUMS", "inputs", "manifest.json", "record.html", "results.json", "workbook.ipynb"}


def page(folder):
    return (folder / "record.html").read_text(encoding="utf-8")


def test_a_record_holds_its_files_and_verifies(issued):
    """The folder holds what it should, nothing else, and every hash is right."""
    assert {path.name for path in issued.folder.iterdir()} == FILES
    assert (issued.folder / "inputs" / "unit.toml").read_bytes() == T1.read_bytes()
    assert verify(issued.folder).exit_code == 0


def test_two_runs_give_the_same_bytes(issued, tmp_path):
    """The page, the results and the notebook do not depend on place or time."""
    again = review(T1, tmp_path / "elsewhere")
    for name in ("record.html", "results.json", "workbook.ipynb"):
        assert (issued.folder / name).read_bytes() == (again.folder / name).read_bytes()


def test_every_number_on_the_page_leads_to_the_results(issued):
    """Each shown value stands under its id in the results, in full."""
    results = read_results(issued.folder)
    shown = data_ids(page(issued.folder))
    assert len(shown) > 200
    for name, value in shown:
        found = lookup(results, name)
        assert (float(value) if isinstance(found, float) else value) == (
            found if isinstance(found, float) else str(found).lower() if isinstance(found, bool) else str(found)
        ), name


def test_no_digits_stand_loose_on_the_page(issued):
    """Digits stand in data, formulas, citations, names and versions only."""
    assert loose_digits(page(issued.folder)) == []


def test_the_page_loads_runs_and_restyles_nothing(issued):
    """The last inspection finds nothing."""
    assert lint(page(issued.folder)) == []


def test_a_dozen_cells_with_formula_and_worked_line(issued):
    """The record shows at least twelve cells of the library, each with its numbers."""
    results = read_results(issued.folder)
    assert len({step["cell"] for step in results["steps"]}) >= 12


def test_no_clock_host_or_path_in_the_record(issued):
    """Page, results and notebook name neither time, host nor folder."""
    for name in ("record.html", "results.json", "workbook.ipynb"):
        text = (issued.folder / name).read_text(encoding="utf-8")
        assert str(Path.home()) not in text
        assert str(issued.folder.parent) not in text
        assert sys.prefix not in text
        assert os.uname().nodename not in re.sub(r"base64,[^\"]*", "", text)
        assert not re.search(r"20\d\d-\d\d-\d\dT\d\d:\d\d", text)


def test_results_carry_what_the_format_asks(issued):
    """Head, verdicts and lists of the results file are all there."""
    results = read_results(issued.folder)
    wanted = "format unit standard kit inputs_sha256 template verdicts route inputs quantities steps checks cases missing open_points"
    assert set(wanted.split()) <= set(results)
    assert results["unit"] == {"tag": "BV-T1", "title": "Brackwater Vale, transformer T1", "revision": "A"}
    assert results["standard"] == "IEC 60076-5:2006"
    assert set(results["verdicts"]) == {"thermal", "dynamic", "overall"}
    for winding in ("HV", "LV"):
        for name in ("symmetrical", "peak", "peak_exact", "terminal_symmetrical", "terminal_peak"):
            assert results["quantities"][f"duty.{winding}.{name}"]["unit"] == "kA"
        assert results["quantities"][f"thermal.{winding}.density"]["unit"] == "A/mm^2"
        assert results["quantities"][f"thermal.{winding}.temperature"]["unit"] == "degC"
    assert results["quantities"]["duty.neutral.HV"]["unit"] == "kA"


def test_the_notebook_is_executed_in_order_and_normalised(issued):
    """Execution counts run from one, and ids and metadata repeat."""
    notebook = nbformat.read(str(issued.folder / "workbook.ipynb"), as_version=4)
    counts = [cell.execution_count for cell in notebook.cells if cell.cell_type == "code"]
    assert counts == list(range(1, len(counts) + 1))
    assert "papermill" not in notebook.metadata


def test_an_unsigned_record_is_replaced(record):
    """A second run replaces an unsigned record."""
    (record / "results.json").write_text("{}")
    again = review(T1, record.parent)
    assert read_results(again.folder)["unit"]["tag"] == "BV-T1"


def test_a_signed_record_is_refused_before_the_work(record, monkeypatch):
    """A record with signatures stays as it is, and nothing is run."""
    (record / "signatures").mkdir()
    (record / "signatures" / "01-author.json").write_text("{}")
    monkeypatch.setattr(run, "fill_record", lambda *_, **__: pytest.fail("was run"))
    with pytest.raises(RecordError) as fault:
        review(T1, record.parent)
    assert str(fault.value) == f"{record}: is signed and stays as it is; give the unit file another revision."


def test_bad_input_writes_nothing(tmp_path):
    """A faulty unit file or an unknown template leaves no folder behind."""
    faulty = tmp_path / "unit.toml"
    faulty.write_text(T1.read_text(encoding="utf-8").replace('"132 kV"', '"132"', 1), encoding="utf-8")
    with pytest.raises(UnitFileError):
        review(faulty, tmp_path / "records")
    with pytest.raises(TemplateError):
        review(T1, tmp_path / "records", "ratng")
    assert not (tmp_path / "records").exists()


def template(tmp_path, *sources):
    cells = [new_code_cell('inputs = "inputs"', metadata={"tags": ["parameters"]})]
    cells += [new_code_cell(source, metadata={"tags": ["finding"]}) for source in sources]
    path = tmp_path / "own.ipynb"
    kernelspec = {"name": "python3", "display_name": "Python 3", "language": "python"}
    nbformat.write(new_notebook(cells=cells, metadata={"kernelspec": kernelspec}), str(path))
    return str(path)


OPENING = "from throughfault import notebook as tf\nreview = tf.open_review(inputs)"


def test_a_failing_cell_names_itself_and_leaves_nothing(tmp_path):
    """When a cell fails there is no record, and the message says which cell and why."""
    with pytest.raises(RunError) as fault:
        review(T1, tmp_path / "records", template(tmp_path, OPENING, 'tf.calculation(review, "densty")'))
    assert str(fault.value) == (
        "own: the cell 'tf.calculation(review, \"densty\")' failed: InputError: "
        "calculation: must name a cell of the library, got 'densty'."
    )
    assert not (tmp_path / "records").exists()


def test_the_same_part_twice_is_refused(tmp_path):
    """A part called twice would emit its verdicts twice, and no record is written."""
    calls = ["tf.summary(review)", "tf.unit_data(review)", "tf.verdict(review)", "tf.verdict(review)"]
    with pytest.raises(RunError, match=r"^results: the same id was emitted twice: route, verdicts\.$"):
        review(T1, tmp_path / "records", template(tmp_path, OPENING, *calls))
    assert not (tmp_path / "records").exists()


def test_a_cell_of_the_library_is_shown_beside_its_part(tmp_path):
    """A calculation shows its steps again beside the part that made them, and emits nothing twice."""
    calls = ["tf.summary(review)", "tf.unit_data(review)", "tf.duty(review)", 'tf.calculation(review, "rated_current")']
    calls += ['tf.calculation(review, "fault_currents")', "tf.verdict(review)", "tf.open_point(review)"]
    made = review(T1, tmp_path / "records", template(tmp_path, OPENING, *calls))
    names = [step["id"] for step in made.results["steps"]]
    assert len(names) == len(set(names))
    assert "Rated current" in page(made.folder)


def test_checks_do_not_depend_on_the_template(issued, tmp_path):
    """A template that leaves out a part has the same checks and verdicts."""
    calls = ["tf.summary(review)", "tf.unit_data(review)", "tf.verdict(review)", "tf.open_point(review)"]
    short = review(T1, tmp_path / "records", template(tmp_path, OPENING, *calls)).results
    assert {c["id"]: c["verdict"] for c in short["checks"]} == {c["id"]: c["verdict"] for c in issued.results["checks"]}
    assert short["verdicts"] == issued.results["verdicts"]
    assert short["quantities"].keys() == issued.results["quantities"].keys()


@pytest.mark.parametrize("name", ["record.html", "results.json", "workbook.ipynb", "manifest.json"])
def test_a_full_disk_leaves_the_old_record(record, monkeypatch, name):
    """When any file cannot be written the old record stays, and nothing half is left beside it."""
    before = {p.name: p.read_bytes() for p in record.iterdir() if p.is_file()}
    real = Path.open

    def full(self, mode="r", *args, **kwargs):
        if self.name == name and "staging" in str(self) and mode[0] in "wxa":
            raise OSError(28, "No space left on device")
        return real(self, mode, *args, **kwargs)

    def full_bytes(self, data):
        with self.open("wb") as file:
            file.write(data)

    monkeypatch.setattr(Path, "open", full)
    monkeypatch.setattr(Path, "write_bytes", full_bytes)
    monkeypatch.setattr(nbformat, "write", lambda nb, path: Path(path).write_bytes(nbformat.writes(nb).encode()))
    with pytest.raises(RecordError) as fault:
        review(T1, record.parent)
    assert str(fault.value) == (
        f"{record.parent}: the record could not be written (No space left on device); nothing was changed."
    )
    assert fault.value.exit_code == 2
    assert {p.name: p.read_bytes() for p in record.iterdir() if p.is_file()} == before
    assert [p.name for p in record.parent.iterdir()] == [record.name]


KILLED = """
import os, signal, sys, threading
from pathlib import Path
from papermill.engines import NotebookExecutionManager as Manager
from throughfault.cli.main import run
begun = threading.Event()
start = Manager.cell_start
def started(self, cell, cell_index=None, **more):
    if cell_index == 3:
        begun.set()
    return start(self, cell, cell_index, **more)
Manager.cell_start = started
def strike():
    if begun.wait(60):
        for entry in Path("/proc").glob("[0-9]*/cmdline"):
            try:
                line = entry.read_bytes()
                parent = (entry.parent / "stat").read_text().rsplit(")", 1)[1].split()[1]
            except OSError:
                continue
            if b"ipykernel_launcher" in line and parent == str(os.getpid()):
                {action}
                return
threading.Thread(target=strike, daemon=True).start()
sys.exit(run(["review", sys.argv[1], "--out", sys.argv[2]]))
"""


@pytest.mark.skipif(not Path("/proc/self/stat").exists(), reason="finds the kernel through /proc")
@pytest.mark.parametrize(
    ("action", "code", "message"),
    [
        (
            "os.kill(int(entry.parent.name), signal.SIGKILL)",
            70,
            "throughfault: rating: the kernel died while the workbook ran; nothing was written.",
        ),
        ("os.kill(os.getpid(), signal.SIGINT)", 130, "throughfault: interrupted; nothing was written."),
        ("os.kill(os.getpid(), signal.SIGTERM)", 130, "throughfault: interrupted; nothing was written."),
        ("os.kill(os.getpid(), signal.SIGHUP)", 130, "throughfault: interrupted; nothing was written."),
        (
            "os.kill(os.getpid(), signal.SIGHUP); os.kill(os.getpid(), signal.SIGTERM)",
            130,
            "throughfault: interrupted; nothing was written.",
        ),
    ],
    ids=["kernel killed", "interrupted", "terminated", "hung up", "hung up and terminated"],
)
def test_a_run_cut_short_leaves_the_old_record(record, action, code, message):
    """A killed kernel, Ctrl-C or a closed terminal leaves the old record, no half one, and says so."""
    before = {p.name: p.read_bytes() for p in record.iterdir() if p.is_file()}
    script = KILLED.replace("{action}", action)
    done = subprocess.run(
        [sys.executable, "-c", script, str(T1), str(record.parent)],
        capture_output=True,
        text=True,
        timeout=120,
        check=False,
    )
    assert done.returncode == code, done.stderr
    assert message in done.stderr
    assert "Traceback" not in done.stderr
    assert {p.name: p.read_bytes() for p in record.iterdir() if p.is_file()} == before
    assert [p.name for p in record.parent.iterdir()] == [record.name]


@pytest.mark.skipif(not hasattr(signal, "SIGHUP"), reason="has no SIGHUP")
def test_what_the_caller_ignores_stays_ignored():
    """Started so that hanging up is ignored, the command line goes on through it."""
    script = (
        "import os, signal, sys; signal.signal(signal.SIGHUP, signal.SIG_IGN)\n"
        "from throughfault.cli import main as m\nfrom throughfault.cli.main import commands, run\n"
        "commands.commands['schema'].callback = lambda: os.kill(os.getpid(), signal.SIGHUP)\n"
        "sys.exit(run(['schema']))"
    )
    assert subprocess.run([sys.executable, "-c", script], check=False, timeout=60).returncode == 0


def test_a_page_that_would_load_something_is_no_record(tmp_path, monkeypatch):
    """When the last inspection of the page finds anything the run fails."""
    monkeypatch.setattr("throughfault.render.record.exporter.lint", lambda page: ["line 3: a script."])
    with pytest.raises(RunError, match=r"^the record is not clean: line 3: a script\.$"):
        review(T1, tmp_path / "records")
    assert not (tmp_path / "records").exists()


def test_design_data_ask_for_the_design_template():
    """The template follows from the unit file, as far as the kit ships one."""

    class Rating:
        design = None

    assert default_template(Rating()) == "rating"


def test_hostile_text_is_inert_on_the_page(tmp_path):
    """Markup in every text of the unit file is shown, not obeyed."""
    evil = "<script>alert(1)</script><img src=x onerror=alert(2)>&amp;"
    text = T1.read_text(encoding="utf-8").replace('"Brackwater Vale, transformer T1"', json.dumps(evil))
    text = text.replace('"Brackwater Vale Networks"', json.dumps(evil))
    unit_file = tmp_path / "unit.toml"
    unit_file.write_text(text, encoding="utf-8")
    made = page(review(unit_file, tmp_path / "records").folder)
    assert lint(made) == []
    assert "<script" not in made
    assert "&lt;script&gt;alert(1)&lt;/script&gt;" in made


def test_leftover_of_an_interrupted_exchange_is_put_back(record):
    """If a run was cut off between the two renames, the next run finds the old record and goes on."""
    aside = record.with_name(f".{record.name}.replaced")
    record.rename(aside)
    review(T1, record.parent)
    assert [p.name for p in record.parent.iterdir()] == [record.name]
