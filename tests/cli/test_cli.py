"""The command line: what each command prints, and with which exit code it leaves."""

import json
import shutil
import subprocess
import sys
from pathlib import Path

import pytest
from cryptography.hazmat.primitives.asymmetric.ed25519 import Ed25519PrivateKey
from cryptography.hazmat.primitives.serialization import (
    BestAvailableEncryption,
    Encoding,
    NoEncryption,
    PrivateFormat,
    PublicFormat,
)

from throughfault import __version__
from throughfault.cli import main as entry_point
from throughfault.cli.main import commands, run

EXAMPLES = (Path(__file__).parents[2] / "example_reviews").resolve()
T1 = str(EXAMPLES / "BV-T1" / "unit.toml")


@pytest.fixture
def call(capfd):
    def go(*arguments):
        code = run([str(a) for a in arguments])
        out, err = capfd.readouterr()
        return code, out, err

    return go


@pytest.fixture
def key(tmp_path):
    made = Ed25519PrivateKey.generate()
    path = tmp_path / "id_ed25519"
    path.write_bytes(made.private_bytes(Encoding.PEM, PrivateFormat.OpenSSH, NoEncryption()))
    path.chmod(0o600)
    public = made.public_key().public_bytes(Encoding.OpenSSH, PublicFormat.OpenSSH).decode()
    signers = tmp_path / "allowed_signers"
    signers.write_text(f'mara@bwv.example namespaces="throughfault-author,throughfault-checker" {public}\n')
    return path, signers


def test_version_and_help(call):
    """The version is printed, and every command's help has an example."""
    assert call("--version")[:2] == (0, f"throughfault, version {__version__}\n")
    code, out, _ = call("--help")
    assert code == 0
    for name in commands.commands:
        assert name in out
        text = call(name, "--help")[1]
        assert f"\n  Example: throughfault {name}" in text
        assert "\\" not in out + text
        assert "\b" not in out + text


def test_entry_point_leaves_with_the_code():
    """The installed command exits with the code of the run."""
    with pytest.raises(SystemExit) as left:
        entry_point(["check", "nowhere.toml"])
    assert left.value.code == 2


def test_new_writes_a_file_that_checks(call, tmp_path, monkeypatch):
    """Each kind of starting file is valid; an existing file is left alone."""
    monkeypatch.chdir(tmp_path)
    for kind in ("two-winding", "three-winding", "auto", "distribution"):
        tag = f"BV-{kind}"
        assert call("new", tag, "--kind", kind)[0] == 0
        assert call("check", f"{tag}.toml")[0] == 0
    code, _, err = call("new", "BV-auto")
    assert (code, err) == (2, "throughfault: BV-auto.toml: exists already and is left as it is; give another --out.\n")
    assert call("new", "X", "--out", tmp_path / "no" / "x.toml")[0] == 2


def test_check_prints_every_fault(call, tmp_path):
    """All faults come at once, each a sentence with its key, and exit code 2."""
    text = (
        Path(T1)
        .read_text(encoding="utf-8")
        .replace('"132 kV"', '"132"', 1)
        .replace('frequency = "50 Hz"', 'frequncy = "50 Hz"')
    )
    path = tmp_path / "unit.toml"
    path.write_text(text, encoding="utf-8")
    code, out, err = call("check", path)
    assert (code, out) == (2, "")
    assert "windings.HV.rated_voltage: must be a voltage" in err
    assert "frequncy" in err
    assert "did you mean 'frequency'?" in err
    assert "Traceback" not in err


@pytest.mark.parametrize("content", [b"", b"\xff\xfe\x00", b"format = ", b"a" * 2_000_000, b"[" * 5000])
def test_what_is_no_unit_file_is_refused(call, tmp_path, content):
    """Empty, binary, truncated, huge or deeply nested files give one report and exit code 2."""
    path = tmp_path / "unit.toml"
    path.write_bytes(content)
    for command in ("check", "review"):
        code, _, err = call(command, path, *(("--out", tmp_path / "records") if command == "review" else ()))
        assert code == 2
        assert err.startswith("throughfault: ")
        assert "Traceback" not in err
    assert [p.name for p in tmp_path.iterdir()] == ["unit.toml"]


def test_schema_is_json(call):
    """The schema is printed as JSON."""
    code, out, _ = call("schema")
    assert code == 0
    assert json.loads(out)["$schema"].startswith("https://json-schema.org/")


def test_cells_lists_and_shows(call):
    """The library is listed; one cell shows formula, symbols, source, range and checks."""
    code, out, _ = call("cells")
    assert code == 0
    assert "average_temperature_copper" in out
    assert "thermal" in out
    code, out, _ = call("cells", "average_temperature_copper")
    assert code == 0
    for word in ("106000", "A/mm", "recalled", "4.1.5", "tests/"):
        assert word in out
    assert call("cells", "fault_currents")[0] == 0
    assert call("cells", "thermal")[1] == "thermal: part of a workbook. Winding temperature at the end of the fault.\n"
    code, _, err = call("cells", "averge_temperature_copper")
    assert code == 2
    assert err == (
        "throughfault: cells: NAME must be a cell of the library, got 'averge_temperature_copper' "
        "(did you mean 'average_temperature_copper'?).\n"
    )


def test_assemble_writes_a_template_that_runs(call, tmp_path, monkeypatch):
    """A template is built from names, not overwritten unasked, and can be run by its name."""
    monkeypatch.chdir(tmp_path)
    assert call("assemble", "--cells", "duty, current_density", "short")[0] == 0
    code, _, err = call("assemble", "--cells", "duty", "short")
    assert (code, err) == (2, "throughfault: templates/short.ipynb: exists already; --replace would replace it.\n")
    assert call("review", T1, "--template", "short", "--out", "records")[0] == 0
    assert "Current density" in (tmp_path / "records" / "BV-T1-A" / "record.html").read_text(encoding="utf-8")
    code, _, err = call("reproduce", "records/BV-T1-A")
    assert (code, err) == (
        2,
        "throughfault: --template: the record was made with 'short', which the kit does not ship; give its path.\n",
    )
    assert call("reproduce", "records/BV-T1-A", "--template", "templates/short.ipynb")[0] == 0


def test_from_unit_file_to_signature(call, tmp_path, key):
    """Review, sign twice, verify in every way, refuse to approve and to overwrite, find a changed file."""
    private, signers = key
    code, out, _ = call("review", T1, "--out", tmp_path / "records")
    assert code == 0
    for word in ("thermal.HV.temperature", "withstands", "not assessed", "Record: ", "limits unconfirmed"):
        assert word in out
    record = tmp_path / "records" / "BV-T1-A"
    assert call("verify", record)[0] == 0
    sign = ("sign", record, "--key", private, "--signer", "mara@bwv.example")
    assert call(*sign, "--role", "author", "--comment", "first issue")[0] == 0
    assert call(*sign, "--role", "checker")[0] == 0
    code, _, err = call(*sign, "--role", "approver")
    assert code == 2
    assert "thermal.HV.temperature" in err
    assert call("verify", record)[0] == 3
    assert call("verify", record, "--signers", signers, "--require", "author,checker")[0] == 0
    assert call("verify", record, "--signers", signers, "--require", "approver")[0] == 1
    code, _, err = call("review", T1, "--out", tmp_path / "records")
    assert (code, err) == (
        2,
        f"throughfault: {record}: is signed and stays as it is; give the unit file another revision.\n",
    )
    assert call("reproduce", record)[0] == 0
    (record / "results.json").write_bytes((record / "results.json").read_bytes().replace(b"within", b"Within", 1))
    code, out, _ = call("verify", record, "--signers", signers)
    assert code == 1
    assert "results.json" in out


@pytest.mark.skipif(shutil.which("ssh-keygen") is None, reason="OpenSSH is not installed")
def test_openssh_and_coreutils_check_a_record_without_the_kit(call, record, key):
    """ssh-keygen accepts the signature and sha256sum the files."""
    private, signers = key
    assert call("sign", record, "--role", "author", "--key", private, "--signer", "mara@bwv.example")[0] == 0
    statement = record / "signatures" / "01-author.json"
    command = [
        "ssh-keygen",
        "-Y",
        "verify",
        "-f",
        signers,
        "-I",
        "mara@bwv.example",
        "-n",
        "throughfault-author",
        "-s",
        statement.with_suffix(".sig"),
    ]
    assert subprocess.run(command, stdin=statement.open("rb"), capture_output=True, check=False).returncode == 0
    assert (
        subprocess.run(["sha256sum", "-c", "SHA256SUMS"], cwd=record, capture_output=True, check=False).returncode == 0
    )


def test_the_printed_command_is_quiet(tmp_path):
    """A review into a relative folder, in a process of its own, prints its table and nothing on the error stream."""
    command = [sys.executable, "-c", "from throughfault.cli import main; main()", "review", T1, "--out", "records"]
    run_alone = subprocess.run(command, cwd=tmp_path, capture_output=True, text=True, check=False)
    assert (run_alone.returncode, run_alone.stderr) == (0, "")
    assert "Record: records/BV-T1-A" in run_alone.stdout


T2 = (EXAMPLES / "BV-T2" / "unit.toml").read_text(encoding="utf-8")


@pytest.mark.parametrize(
    ("old", "new", "sentence"),
    [
        (
            "[earthing]",
            '[system.TV]\nout_of_phase = "180 deg"\n\n[earthing]',
            "system.TV.out_of_phase: needs system.TV.short_circuit_power beside it.",
        ),
        (
            "[declared]",
            '[limits]\n"thermal.HV.temperature" = { value = "-5 degC", source = "x" }\n\n[declared]',
            "limits.\"thermal.HV.temperature\".value: must be above zero, as a limit is, got '-5 degC'.",
        ),
        (
            "[declared]",
            '[limits]\n"apparatus.bushings.HV.peak_current" = { value = "12 kV", source = "x" }\n\n[declared]',
            "limits.\"apparatus.bushings.HV.peak_current\".value: must be a current (unit one of mA, A, kA) for 'apparatus.bushings.HV.peak_current', got 12 kV.",
        ),
    ],
)
def test_what_no_review_could_use_is_refused(call, tmp_path, old, new, sentence):
    """Check and review refuse it alike, in a sentence and with exit code 2."""
    path = tmp_path / "unit.toml"
    path.write_text(T2.replace(old, new, 1), encoding="utf-8")
    for arguments in (("check", path), ("review", path, "--out", tmp_path / "records")):
        code, _, err = call(*arguments)
        assert code == 2
        assert err.startswith(f"throughfault: {path}: [line ")
        assert err.endswith(f"] {sentence}\n")


@pytest.mark.parametrize(
    "content",
    ['{"format":"throughfault-results/1"}', '{"format":"throughfault-results/1","kit":{}}', "[" * 5000, '{"x":' * 900],
)
def test_a_malformed_record_is_bad_input(call, record, content):
    """A record whose results cannot be used is refused in a sentence."""
    (record / "results.json").write_text(content, encoding="utf-8")
    code, _, err = call("reproduce", record)
    assert code == 2
    assert err.startswith(f"throughfault: {record}: ")
    assert "Traceback" not in err


def test_strict_answers_with_its_exit_code(call, tmp_path):
    """--strict leaves with 1 unless the overall verdict is 'withstands'."""
    assert call("review", T1, "--out", tmp_path, "--strict")[0] == 1


def test_reproduce_says_no(call, record):
    """A changed number is named and the exit code is 1."""
    path = record / "results.json"
    results = json.loads(path.read_bytes())
    results["quantities"]["duty.LV.peak"]["value"] += 0.001
    path.write_text(json.dumps(results))
    code, out, _ = call("reproduce", record)
    assert code == 1
    assert "quantities/duty.LV.peak/value: record " in out
    assert "1 differences in" in out


@pytest.mark.parametrize(
    "arguments",
    [
        ("nonsense",),
        ("review",),
        ("sign", "x", "--role", "boss", "--key", "k", "--signer", "s"),
        ("check", "missing.toml"),
        ("verify", "missing"),
        ("reproduce", "missing"),
        ("assemble", "--cells", "x", "y"),
    ],
)
def test_wrong_calls_leave_with_2(call, arguments):
    """Unknown commands, missing arguments and missing files are bad input."""
    code, _, err = call(*arguments)
    assert code == 2
    assert err
    assert "Traceback" not in err


def test_interruption_and_faults_of_the_kit(call, monkeypatch):
    """Ctrl-C leaves with 130, an unforeseen fault with 70 and its whole story."""
    from throughfault.workbook import outlook as module

    def interrupted(_):
        raise KeyboardInterrupt

    monkeypatch.setattr(module, "read_unit", interrupted)
    code, _, err = call("check", T1)
    assert (code, err.strip()) == (130, "throughfault: interrupted; nothing was written.")

    def broken(_):
        raise ZeroDivisionError

    monkeypatch.setattr(module, "read_unit", broken)
    code, _, err = call("check", T1)
    assert code == 70
    assert err.endswith("throughfault: this is a fault of the kit; nothing was written.\n")


@pytest.mark.parametrize("named", ["IEC 60076-5:1976", "IEEE C57.12.00-1999"])
def test_an_edition_that_is_not_carried_is_refused(call, tmp_path, record, named):
    """Check, review and reproduce name the editions there are, before anything is run."""
    text = Path(T1).read_text(encoding="utf-8").replace("IEC 60076-5:2006", named, 1)
    path = tmp_path / "unit.toml"
    path.write_text(text, encoding="utf-8")
    (record / "inputs" / "unit.toml").write_text(text, encoding="utf-8")
    sentence = (
        'standard: must be one of "IEC 60076-5", "IEC 60076-5:2006", "IEEE C57.12.00", '
        f'"IEEE C57.12.00-2015", got {named!r} (did you mean '
    )
    for arguments in (("check", path), ("review", path, "--out", tmp_path / "new"), ("reproduce", record)):
        code, out, err = call(*arguments)
        assert (code, out) == (2, "")
        name = record / "inputs" / "unit.toml" if arguments[0] == "reproduce" else path
        assert err.startswith(f"throughfault: {name}: {sentence}")
        assert err.count("\n") == 1
    assert not (tmp_path / "new").exists()


def check_of(call, tmp_path, *edits):
    text = Path(T1).read_text(encoding="utf-8")
    for old, new in edits:
        assert old in text, old
        text = text.replace(old, new, 1)
    path = tmp_path / "unit.toml"
    path.write_text(text, encoding="utf-8")
    code, out, err = call("check", path)
    assert (code, err) == (0, "")
    return out.removesuffix("\n").split("\n"), path


def test_check_warns_of_what_only_the_standard_knows(call, tmp_path):
    """An impedance below the standard's minimum is an open point, and one is counted as one."""
    lower = [(f'impedance = "1{digits} %"', f'impedance = "{digits} %"') for digits in ("2.9", "2.5", "2.2")]
    lines, path = check_of(call, tmp_path, *lower)
    assert [line for line in lines if line.startswith("open point: ")] == [
        "open point: The impedance of HV-LV, 2.5 %, is below the standard's minimum, 10 %."
    ]
    assert lines[-1] == f"{path}: valid; 1 open point, 1 result not assessed, by IEC 60076-5:2006."


def test_check_names_what_cannot_be_assessed(call, tmp_path):
    """Each result that a review could not give is named with its reason and the keys that would supply it."""
    lines, path = check_of(call, tmp_path, ('conductor_section = "62 mm^2"\n', ""))
    assert (
        "not assessed: thermal.HV.temperature: the temperature cannot be worked out without these inputs; "
        "needs windings.HV.conductor_section"
    ) in lines
    assert lines[-1] == f"{path}: valid; 0 open points, 2 results not assessed, by IEC 60076-5:2006."
    assert "default used: rating.bank = false" in lines


def test_check_counts_in_the_singular(call):
    """One result is one result."""
    code, out, _ = call("check", T1)
    assert code == 0
    assert out.endswith(f"{T1}: valid; 0 open points, 1 result not assessed, by IEC 60076-5:2006.\n")


def test_check_writes_nothing(call, tmp_path, monkeypatch):
    """Looking at a file leaves no trace."""
    monkeypatch.chdir(tmp_path)
    assert call("check", T1)[0] == 0
    assert list(tmp_path.iterdir()) == []


@pytest.mark.parametrize("template", ["nope", "."])
def test_a_template_that_cannot_be_read_is_bad_input(call, record, template):
    """Reproducing with a template that is not there, or is a folder, ends in a sentence."""
    code, out, err = call("reproduce", record, "--template", template)
    assert (code, out) == (2, "")
    assert err.startswith(f"throughfault: --template: must be the path of a .ipynb file, got '{template}', which ")
    assert err.count("\n") == 1


def test_an_encrypted_key_needs_a_terminal(record, tmp_path):
    """Without a terminal nobody is asked for the passphrase, and the record stays unsigned."""
    path = tmp_path / "id_ed25519"
    lock = BestAvailableEncryption(b"secret words")
    path.write_bytes(Ed25519PrivateKey.generate().private_bytes(Encoding.PEM, PrivateFormat.OpenSSH, lock))
    command = [sys.executable, "-c", "from throughfault.cli import main; main()", "sign", str(record)]
    command += ["--role", "author", "--key", str(path), "--signer", "mara@bwv.example"]
    done = subprocess.run(
        command, stdin=subprocess.DEVNULL, capture_output=True, text=True, start_new_session=True, check=False
    )
    assert (done.returncode, done.stdout, done.stderr) == (
        2, "", "throughfault: sign: the key needs a passphrase and there is no terminal to ask at.\n",
    )  # fmt: skip
    assert not (record / "signatures").exists()


def test_a_folder_as_a_key_is_named_as_given(call, record):
    """The path of a key that cannot be read is told as it was given."""
    code, _, err = call("sign", record, "--role", "author", "--key", ".", "--signer", "x")
    assert (code, err) == (2, "throughfault: key .: cannot be read: Is a directory\n")


@pytest.mark.parametrize("decision", ["reject", "conditional"])
def test_verify_states_a_decision_against(call, record, key, decision):
    """A decision that is no plain acceptance is stated in a sentence of its own; the record is intact all the same."""
    private, signers = key
    sign = ("sign", record, "--role", "author", "--key", private, "--signer", "mara@bwv.example")
    assert call(*sign, "--decision", decision)[0] == 0
    code, out, _ = call("verify", record, "--signers", signers)
    assert code == 0
    assert f"The latest decision of the author, by mara@bwv.example, is {decision}." in out.split("\n")
    assert call(*sign)[0] == 0
    assert "latest decision" not in call("verify", record, "--signers", signers)[1]


def test_assembling_nothing_is_refused(call, tmp_path, monkeypatch):
    """An empty list of cells, and the name of the kit's own template, write nothing."""
    monkeypatch.chdir(tmp_path)
    assert call("assemble", "--cells", "", "x")[0] == 2
    assert call("assemble", "--cells", " , ", "x")[0] == 2
    assert call("assemble", "--cells", "duty", "rating")[0] == 2
    assert list(tmp_path.iterdir()) == []
