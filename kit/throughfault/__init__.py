"""Design-review workbook kit for the short-circuit withstand of power transformers."""

import sys
from importlib.metadata import PackageNotFoundError, version

# jsonschema's optional IRI checker builds some 35 parsers at import; no notebook schema uses IRIs,
# and jsonschema does without it when the import fails.
sys.modules.setdefault("rfc3987_syntax", None)  # type: ignore[arg-type]

try:
    __version__ = version("throughfault")
except PackageNotFoundError:  # a source tree that was never installed
    __version__ = "0+source"

__all__ = ["__version__"]
