"""`python -m tests.campaign [FIGURES.json]`: the full run; prints every figure beside its bound."""

from __future__ import annotations

import json
import sys
from pathlib import Path

from tabulate import tabulate

from tests.campaign.run import FULL, bound_of, put, time_ratio


def main() -> int:
    rows: list[tuple[str, int, float, float | None]] = []
    missed: list[str] = []
    for question, designs in FULL.items():
        tally = put(question, designs)
        for figure in tally.asked:
            share, bound = tally.share(figure), bound_of(figure)
            rows.append((figure, tally.asked[figure], share, bound))
            if bound is not None and share < bound:
                missed += [
                    f"{figure}: {which} -> {told}" for name, which, told in tally.missed if name == figure
                ][:5]
    ratio = time_ratio(1000)
    shown = [[f, n, f"{s:.2f}", "–" if b is None else f"{b:g}"] for f, n, s, b in rows]
    print(
        tabulate(shown, ["figure", "asked", "per cent", "at least"], tablefmt="plain", disable_numparse=True)
    )
    print(
        f"time: flawed members, reasoning included, over the same members without the flaw: {ratio:.2f} (at most 5)"
    )
    print(*missed, sep="\n")
    if len(sys.argv) > 1:
        figures = [{"figure": f, "asked": n, "per_cent": s, "at_least": b} for f, n, s, b in rows]
        Path(sys.argv[1]).write_text(
            json.dumps({"figures": figures, "time_ratio": ratio}, indent=1), encoding="utf-8"
        )
    return 1 if missed else 0


if __name__ == "__main__":
    raise SystemExit(main())
