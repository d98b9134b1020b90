"""The whole review command against the stock commands on the same notebook, pair by pair in one run."""

import os
import shutil
import statistics
import subprocess
import sys
from pathlib import Path
from time import perf_counter

import pytest

from throughfault.workbook.resources import templates_folder

T1 = (Path(__file__).parents[2] / "example_reviews" / "BV-T1" / "unit.toml").resolve()
PAIRS = 3
NEEDED = 0.6


def timed(*command, folder):
    """Run a command in a folder with one thread for each library and return its time."""
    environment = {**os.environ, "OMP_NUM_THREADS": "1", "OPENBLAS_NUM_THREADS": "1", "MPLBACKEND": "agg"}
    start = perf_counter()
    subprocess.run([str(part) for part in command], cwd=folder, env=environment, check=True, capture_output=True)
    return perf_counter() - start


def stock(folder):
    """Papermill, then nbconvert, as anybody would call them."""
    (folder / "inputs").mkdir(parents=True)
    shutil.copy(T1, folder / "inputs" / "unit.toml")
    template = templates_folder() / "rating.ipynb"
    first = timed(sys.executable, "-m", "papermill", template, "out.ipynb", "-p", "inputs", "inputs", folder=folder)
    return first + timed(sys.executable, "-m", "jupyter", "nbconvert", "--to", "html", "out.ipynb", folder=folder)


def ours(folder):
    """Review: checked, executed, exported, inspected, hashed, published."""
    folder.mkdir()
    code = "from throughfault.cli import main; main()"
    return timed(sys.executable, "-c", code, "review", T1, "--out", folder / "records", folder=folder)


@pytest.mark.slow
def test_review_against_stock_commands(benchmark, tmp_path, capsys):
    """Both make their files; the ratio of the medians is printed and recorded, never asserted."""
    times = [(ours(tmp_path / f"ours{i}"), stock(tmp_path / f"stock{i}")) for i in range(PAIRS)]
    ratio = statistics.median(a for a, _ in times) / statistics.median(b for _, b in times)
    benchmark.extra_info.update(pairs=PAIRS, ratio=round(ratio, 3), needed=NEEDED)
    benchmark.pedantic(ours, (tmp_path / "again",), rounds=1)
    with capsys.disabled():
        print(f"\nreview: {ratio:.2f} of the time of papermill and nbconvert (needed: {NEEDED}); pairs {times}")
    assert (tmp_path / "ours0" / "records" / "BV-T1-A" / "record.html").is_file()
    assert (tmp_path / "stock0" / "out.html").is_file()
