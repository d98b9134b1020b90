"""Run every example review again and replace the committed records."""

import shutil
import sys
from pathlib import Path

from throughfault.workbook.run import review

EXAMPLES = Path(__file__).parents[1] / "example_reviews"


def main() -> None:
    """Rebuild the records named on the command line, or all."""
    wanted = sys.argv[1:]
    for unit_file in sorted(EXAMPLES.glob("*/unit.toml")):
        folder = unit_file.parent
        if wanted and folder.name not in wanted:
            continue
        for old in folder.glob(f"{folder.name}-*"):
            shutil.rmtree(old)
        issued = review(unit_file, folder, progress=sys.stderr.isatty())
        print(f"{issued.folder.name}: {issued.results['verdicts']}")


if __name__ == "__main__":
    main()
