"""The parts of a workbook: each is one call in a notebook and one section of the record."""

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["FRAME_AFTER", "FRAME_BEFORE", "PARTS", "Part"]


@dataclass(frozen=True, slots=True)
class Part:
    """A section of the record.

    Attributes
    ----------
    name
        As ``throughfault assemble --cells`` takes it.
    title
        What it shows, for readers of the library.
    tag
        Tag of its notebook cell.
    """

    name: str
    title: str
    tag: str

    @property
    def call(self) -> str:
        """The one line of its notebook cell."""
        return f"tf.{self.name}(review)"


_ALL = (
    Part("summary", "Identity, verdict by ability, governing cases, limits unconfirmed, cautions", "finding"),
    Part("unit_data", "The unit file as given, and the defaults that were used", "note"),
    Part("requirement", "What the standard asks of this unit", "finding"),
    Part("duty", "Fault currents of every winding, terminal and neutral in every case", "finding"),
    Part("thermal", "Winding temperature at the end of the fault", "finding"),
    Part("verdict", "Every check with its limit and origin, and the verdicts drawn from them", "finding"),
    Part("open_point", "Open points and what could not be assessed", "finding"),
    Part("signature", "Signature lines and how to verify the record", "signature"),
)

#: part name -> part, in the order of a record
PARTS = {part.name: part for part in _ALL}
#: added in front of, and behind, an assembled list when not named in it
FRAME_BEFORE = ("summary", "unit_data")
FRAME_AFTER = ("verdict", "open_point", "signature")
