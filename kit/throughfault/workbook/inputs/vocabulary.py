"""The words of the model: where values are found, how a key is declared, and the common kinds of value."""

from typing import Annotated, Any, Literal

from pydantic import Field
from pydantic.config import JsonDict

from throughfault.quantities import Quantity
from throughfault.workbook.inputs.leaves import NAME, Count, Flag, Match, OneOf, Text
from throughfault.workbook.inputs.measures import Measure

#: where a user finds a value
PLATE = "rating plate"
TEST = "routine test report"
NETWORK = "network operator"
DESIGN = "maker's design sheet"
ORDER = "order specification"


def key(
    meaning: str,
    source: str = "",
    *,
    default: Any = ...,
    in_words: str = "",
    at_least: int | None = None,
    at_most: int | None = None,
) -> Any:
    """Declare a key of the unit file.

    Parameters
    ----------
    meaning, source
        What the value means and where a user finds it.
    default, in_words
        Its default, and the default in words where None stands for something found later.
    at_least, at_most
        Fewest and most entries of an array or table.
    """
    extra: JsonDict = {"source": source, "default_in_words": in_words}
    given: dict[str, Any] = {"description": meaning, "json_schema_extra": extra}
    given |= {"min_length": at_least, "max_length": at_most}
    if isinstance(default, Quantity | dict):
        return Field(default_factory=lambda: default, **given)
    return Field(default, **given)


#: most entries; far more than any unit has, few enough to compare each with each
MOST_WINDINGS = 9
MOST_ROWS = 2000
MOST_COILS = 40
MOST_BLOCKS = 200
MOST_RESULTS = 1000

Title = Annotated[str, Text()]
Name = Annotated[str, Match(NAME, "at most 16 letters, digits and underscores, first a letter")]
Yes = Annotated[bool, Flag()]
Whole = Annotated[int, Count()]
Voltage = Annotated[Quantity, Measure("kV")]
Current = Annotated[Quantity, Measure("kA")]
Power = Annotated[Quantity, Measure("MVA")]
Loss = Annotated[Quantity, Measure("kW")]
Percent = Annotated[Quantity, Measure("%", most=1000.0)]
Tolerance = Annotated[Quantity, Measure("%", most=50.0)]
Ohm = Annotated[Quantity, Measure("ohm")]
Length = Annotated[Quantity, Measure("mm")]
Height = Annotated[Quantity, Measure("mm", least_allowed=True)]
Area = Annotated[Quantity, Measure("mm^2")]
Duration = Annotated[Quantity, Measure("s", most=3600.0)]
Frequency = Annotated[Quantity, Measure("Hz", most=400.0)]
Angle = Annotated[Quantity, Measure("deg", most=180.0)]
Class = Annotated[int, Count(90, 300)]
Temperature = Annotated[Quantity, Measure("degC", least=-60.0, most=400.0)]
Stress = Annotated[Quantity, Measure("MPa", most=10_000.0)]
Force = Annotated[Quantity, Measure("kN")]
Material = Annotated[Literal["copper", "aluminium"], OneOf(("copper", "aluminium"))]
