"""Signature lines, and how anyone checks the record without this kit."""

from __future__ import annotations

from collections.abc import Sequence

from markupsafe import Markup

from throughfault.render.html import Text, code, items, section, table

__all__ = ["ROLES", "signature_part"]

ROLES = ("author", "checker", "approver", "witness")


def _command(text: str) -> Markup:
    return Markup('<pre class="identity">{}</pre>').format(text)


def _steps(folder: str) -> list[Text]:
    signed = (
        "ssh-keygen -Y verify -f allowed_signers -I SIGNER -n throughfault-ROLE "
        "-s signatures/NN-ROLE.sig < signatures/NN-ROLE.json"
    )
    return [
        Markup("No file has changed: in the record's folder {}").format(_command("sha256sum -c SHA256SUMS")),
        Markup("A signature is good, by your own list of who may sign as what: {}").format(_command(signed)),
        Markup("Both at once, with this kit: {}").format(
            _command(f"throughfault verify {folder} --signers allowed_signers --require author,checker,approver")
        ),
        Markup("The numbers come out again from the inputs: {}").format(_command(f"throughfault reproduce {folder}")),
    ]


def signature_part(tag: str, revision: str, roles: Sequence[str] = ROLES) -> Markup:
    """Give each role a line to sign on paper, and say how the record and its signatures are verified."""
    lines: list[list[Text]] = [[role.capitalize(), "", "", "", ""] for role in roles]
    verified = Markup(
        "<p>Electronic signatures stand in the folder {} beside this page, each over the hash of {}. To verify:</p>{}"
    ).format(code("signatures/"), code("manifest.json"), items(_steps(f"{tag}-{revision}"), "how"))
    return section(
        "Signatures",
        table("Signed on paper", ["Role", "Name", "Decision", "Date", "Signature"], lines, "signatures"),
        section("How to verify", verified, id="how-to-verify", level=3),
        id="signatures",
    )
