"""The verifier's allowed_signers file, read as ssh-keygen reads it."""

import shutil
import subprocess
from datetime import UTC, datetime, timedelta

import pytest
from cryptography.hazmat.primitives.asymmetric.ed25519 import Ed25519PrivateKey
from cryptography.hazmat.primitives.serialization import Encoding, PublicFormat
from hypothesis import example, given
from hypothesis import strategies as st

from throughfault.errors import InputError
from throughfault.workbook.allowed_signers import identify, matches, read_allowed_signers
from throughfault.workbook.ssh_signature import public_blob, sign_bytes

needs_ssh_keygen = pytest.mark.skipif(shutil.which("ssh-keygen") is None, reason="ssh-keygen is not on this machine")
KEY = Ed25519PrivateKey.from_private_bytes(bytes(range(32)))
BLOB = public_blob(KEY.public_key())
PUBLIC = KEY.public_key().public_bytes(Encoding.OpenSSH, PublicFormat.OpenSSH).decode()
OTHER = Ed25519PrivateKey.from_private_bytes(bytes(32)).public_key()
OTHER_PUBLIC = OTHER.public_bytes(Encoding.OpenSSH, PublicFormat.OpenSSH).decode()
NOON = datetime(2026, 11, 3, 12, tzinfo=UTC)


def read(tmp_path, text):
    path = tmp_path / "allowed_signers"
    path.write_text(text)
    return read_allowed_signers(path)


def known(tmp_path, text, signer="Ann Author", role="author", moment=NOON):
    return identify(read(tmp_path, text), signer, BLOB, f"throughfault-{role}", moment)


LINES = [
    f'"Ann Author" {PUBLIC}',
    f'"Ann Author" {PUBLIC} a comment with spaces',
    f'"Ann *,x" namespaces="throughfault-author" {PUBLIC}',
    f'"Ann *,!Ann Author" {PUBLIC}',
    f'"Ann ?uthor"\tNAMESPACES="other,throughfault-*" {PUBLIC}',
    f'"Ann Author" namespaces="throughfault-*,!throughfault-author" {PUBLIC}',
    f'"Ann Author" namespaces="throughfault-checker" {PUBLIC}',
    f'"ann author" {PUBLIC}',
    f'"Ann Author" {OTHER_PUBLIC}',
    f'"Ann Author" {OTHER_PUBLIC}\n"Ann Author" {PUBLIC}',
    f'"Ann Author" valid-after="20261103120000Z" {PUBLIC}',
    f'"Ann Author" valid-after="20261103120001Z" {PUBLIC}',
    f'"Ann Author" valid-before="20261103120000Z" {PUBLIC}',
    f'"Ann Author" valid-before="202611031159Z" {PUBLIC}',
    f'"Ann Author" valid-after="20261103Z",valid-before="20261104Z",namespaces="throughfault-author" {PUBLIC}',
    f'"Ann Author" valid-after="20261104Z" {PUBLIC}',
    f'"Ann Author" valid-after="20261103" {PUBLIC}',
    f'"Ann Author" valid-before="202611031201" {PUBLIC}',
    f'# comment\n\n   \n"Ann Author" {PUBLIC}',
    f"* {PUBLIC}",
    f"Ann {PUBLIC}",
]


@needs_ssh_keygen
@pytest.mark.parametrize("text", LINES)
@pytest.mark.parametrize("zone", ["UTC", "Australia/Sydney"])
def test_ssh_keygen_agrees(tmp_path, monkeypatch, text, zone):
    """For every form of a line, ssh-keygen and the kit come to the same answer, in the verifier's time zone too."""
    import time

    monkeypatch.setenv("TZ", zone)
    time.tzset()
    ours = known(tmp_path, f"{text}\n")
    (tmp_path / "x.sig").write_text(sign_bytes(b"x", KEY, "throughfault-author"))
    done = subprocess.run(
        [
            "ssh-keygen",
            "-Y",
            "verify",
            "-f",
            "allowed_signers",
            "-I",
            "Ann Author",
            "-n",
            "throughfault-author",
            "-s",
            "x.sig",
            "-O",
            "verify-time=20261103120000Z",
        ],
        cwd=tmp_path,
        input=b"x",
        capture_output=True,
        check=False,
    )
    monkeypatch.undo()
    time.tzset()
    assert ours.identified == (done.returncode == 0), (ours.reason, done.stderr, done.stdout)


@pytest.mark.parametrize(
    ("text", "identified", "reason"),
    [
        (LINES[0], True, "line 1 of the signers file (for every role)"),
        (LINES[2], True, "line 1 of the signers file"),
        (LINES[3], False, "no line of the signers file names 'Ann Author'"),
        (LINES[6], False, "line 1 does not grant the namespace throughfault-author"),
        (LINES[8], False, "line 1 gives another key"),
        (LINES[9], True, "line 2 of the signers file (for every role)"),
        (LINES[11], False, "line 1 is not valid before 2026-11-03 12:00:01 UTC"),
        (LINES[13], False, "line 1 is not valid after 2026-11-03 11:59:00 UTC"),
        (
            LINES[6] + "\n" + LINES[8],
            False,
            "line 1 does not grant the namespace throughfault-author; line 2 gives another key",
        ),
        ("", False, "no line of the signers file names 'Ann Author'"),
    ],
)
def test_reason_names_the_line(tmp_path, text, identified, reason):
    """The answer says which line decides."""
    found = known(tmp_path, text)
    assert (found.identified, found.reason) == (identified, reason)


@pytest.mark.parametrize(
    ("line", "fault"),
    [
        ("Ann", "needs principals, options, key type and key"),
        (f"Ann cert-authority {PUBLIC}", "cert-authority is not supported; give the signer's own Ed25519 key"),
        (
            f'Ann cert-authority,namespaces="x" {PUBLIC}',
            "cert-authority is not supported; give the signer's own Ed25519 key",
        ),
        (f'Ann namespace="x" {PUBLIC}', "unknown option 'namespace'; known are namespaces, valid-after, valid-before"),
        (f"Ann namespaces {PUBLIC}", "option namespaces must be given once, with a value in quotation marks"),
        (f'Ann namespaces="" {PUBLIC}', "option namespaces must be given once, with a value in quotation marks"),
        (
            f'Ann namespaces="a",namespaces="b" {PUBLIC}',
            "option namespaces must be given once, with a value in quotation marks",
        ),
        (
            f"Ann namespaces=x {PUBLIC[:20]}",
            "options must be name=\"value\" with commas between, got 'namespaces=x ssh-ed25519 AAAAC3Nz'",
        ),
        (f'Ann valid-after="2026" {PUBLIC}', "valid-after must be YYYYMMDD[Z] or YYYYMMDDHHMM[SS][Z], got '2026'"),
        (f'Ann valid-before="20261301Z" {PUBLIC}', "valid-before is no date and time, got '20261301Z'"),
        ("Ann ssh-ed25519", "the key must be a key type and base64"),
        ("Ann ssh-ed25519 AAA", "the key must be a key type and base64"),
        (f"Ann ssh-rsa {PUBLIC.split()[1]}", "the key is not of the type 'ssh-rsa' that stands before it"),
    ],
)
def test_wrong_line_is_named(tmp_path, line, fault):
    """A wrong line is refused with its number."""
    with pytest.raises(InputError) as caught:
        read(tmp_path, f"# who\n{line}\n")
    assert caught.value.faults == (f"signers file allowed_signers, line 2: {fault}",)


def test_every_wrong_line_is_named(tmp_path):
    """All wrong lines stand in one report."""
    with pytest.raises(InputError) as caught:
        read(tmp_path, f"Ann\n* {PUBLIC}\nBen ssh-ed25519\n")
    assert [fault.split(":")[0] for fault in caught.value.faults] == [
        "signers file allowed_signers, line 1",
        "signers file allowed_signers, line 3",
    ]


def test_unreadable_signers_file_is_refused(tmp_path):
    """A signers file that is missing or no text is refused."""
    with pytest.raises(InputError) as caught:
        read_allowed_signers(tmp_path / "none")
    assert caught.value.faults == ("signers file none: cannot be read: No such file or directory",)
    (tmp_path / "bad").write_bytes(b"\xff")
    with pytest.raises(InputError, match=r"^signers file bad: cannot be read: 'utf-8' codec"):
        read_allowed_signers(tmp_path / "bad")


@given(st.text("ab*?!,", max_size=8), st.text("ab", max_size=5))
@example("*,!a", "a")
def test_negation_never_grants(patterns, text):
    """With a pattern list every negated pattern only takes away."""
    positive = ",".join(pattern for pattern in patterns.split(",") if not pattern.startswith("!"))
    assert matches(text, patterns) <= matches(text, positive) if positive else not matches(text, patterns) or text == ""


@given(st.text(max_size=10).filter(lambda text: not set(text) & set(",*?!")))
def test_plain_pattern_matches_itself_alone(text):
    """A pattern without wildcards is the text itself; regular-expression signs mean nothing."""
    assert matches(text, text)
    assert not matches(f"{text}x", text)


@given(st.integers(0, 2**31 - 1).map(lambda seconds: datetime.fromtimestamp(seconds, UTC)))
def test_validity_is_inclusive(tmp_path_factory, moment):
    """A key is valid at both ends of its time and not a second beyond."""
    text = f'Ann valid-after="{moment:%Y%m%d%H%M%S}Z",valid-before="{moment:%Y%m%d%H%M%S}Z" {PUBLIC}'
    folder = tmp_path_factory.mktemp("signers")
    second = timedelta(seconds=1)
    assert [
        known(folder, text, signer="Ann", moment=moment + shift).identified for shift in (-second, 0 * second, second)
    ] == [
        False,
        True,
        False,
    ]
