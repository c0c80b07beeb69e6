"""Holds the branch coverage of the core floors above a least value, and names what is not covered.

Reads the JSON report of coverage.py. The core is everything below the contract: a line of it that no test
runs could hold any number.
"""

import json
import sys
from pathlib import Path

CORE = ("kernel", "library", "physics", "calc")
LEAST_PERCENT = 95.0


def main(report: Path) -> int:
    """Print the coverage of each floor; fail if one lies below the least."""
    files = json.loads(report.read_text())["files"]
    status = 0
    for floor in CORE:
        own = [
            (name, entry["summary"])
            for name, entry in files.items()
            if f"loopslack/{floor}/" in name.replace("\\", "/")
        ]
        wanted = sum(summary["num_statements"] + summary["num_branches"] for _, summary in own)
        met = sum(summary["covered_lines"] + summary["covered_branches"] for _, summary in own)
        percent = 100.0 * met / wanted if wanted else 0.0
        sys.stdout.write(f"{floor}: {percent:.1f} % of {wanted} statements and branches\n")
        if percent < LEAST_PERCENT:
            status = 1
            worst = sorted(own, key=lambda item: item[1]["percent_covered"])[:5]
            for name, summary in worst:
                sys.stdout.write(f"  {name}: {summary['percent_covered']:.1f} %\n")
    if status:
        sys.stdout.write(f"The core must be covered to {LEAST_PERCENT} % or more.\n")
    return status


sys.exit(main(Path(sys.argv[1])))
