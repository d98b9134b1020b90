"""The documents of a record folder that are read back: their names, and the keys that are leaned on."""

from __future__ import annotations

from typing import Annotated, Literal

from pydantic import BaseModel, ConfigDict, Field

__all__ = ["MANIFEST", "REQUIRED", "RESULTS", "SIGNATURES", "SUMS", "Manifest", "ResultsFace", "Sha256"]

MANIFEST = "manifest.json"
RESULTS = "results.json"
SUMS = "SHA256SUMS"
SIGNATURES = "signatures/"
REQUIRED = ("record.html", "workbook.ipynb", RESULTS)
MANIFEST_LIMIT = 1 << 20  # bytes; a larger one is refused unread
RESULTS_LIMIT = 1 << 26
TIME_PATTERN = r"^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\dZ$"

Sha256 = Annotated[str, Field(pattern=r"^[0-9a-f]{64}$")]


class _Face(BaseModel):
    """A part of a document that is read strictly; keys that this kit does not know are left alone."""

    model_config = ConfigDict(strict=True, frozen=True, extra="ignore")


class FileEntry(_Face):
    """One file of the record."""

    path: str
    size: Annotated[int, Field(ge=0)]  # bytes
    sha256: Sha256


class KitFace(_Face):
    """The kit that made the record."""

    version: str


class TemplateFace(_Face):
    """The notebook template that was run."""

    name: str
    sha256: Sha256


class PlatformFace(_Face):
    """The machine's kind, never its name."""

    system: str
    machine: str


class Manifest(_Face):
    """The content of `manifest.json`."""

    format: Literal["throughfault-manifest/1"]
    created: Annotated[str, Field(pattern=TIME_PATTERN)]  # UTC, the record's only clock time
    files: list[FileEntry]
    kit: KitFace
    dependencies: dict[str, str]
    python: str
    platform: PlatformFace
    template: TemplateFace
    tables: dict[str, Sha256]
    inputs_sha256: Sha256


class UnitFace(_Face):
    """Which unit was reviewed."""

    tag: str
    revision: str


class CheckFace(_Face):
    """What a signature depends on in a check."""

    id: str
    verdict: Literal["within", "exceeds", "not assessed"]
    limit_provenance: str | None = None


class ResultsFace(_Face):
    """The keys of `results.json` that the manifest and the signatures lean on."""

    unit: UnitFace
    kit: KitFace
    template: TemplateFace
    inputs_sha256: Sha256
    checks: list[CheckFace]

    @property
    def unconfirmed(self) -> tuple[str, ...]:
        """Ids of the checks that decide by a limit from memory."""
        return tuple(
            check.id
            for check in self.checks
            if check.verdict != "not assessed" and check.limit_provenance == "recalled"
        )
