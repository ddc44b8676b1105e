"""`python -m tests.benchmarks`: every ratio measured side by side in one run, printed as a table, kept as JSON."""

from __future__ import annotations

import json
import os
import subprocess
import sys
import tempfile
import time
from pathlib import Path
from statistics import median

import numpy as np
from tabulate import tabulate

from tests.benchmarks.handwritten import recompute_by_hand

ROOT = Path(__file__).parents[2]
ROUNDS = 15
ROWS = 10_000


def main() -> None:
    rows = [one_file(), *columns(), page()]
    heads = ["what", "ours, ms", "yardstick, ms", "ratio", "at most"]
    shown = [[*row[:1], f"{row[1]:.1f}", f"{row[2]:.1f}", f"{row[3]:.2f}", f"{row[4]:.1f}"] for row in rows]
    print(tabulate(shown, heads, tablefmt="plain", disable_numparse=True))
    if len(sys.argv) > 1:
        keys = ("what", "ours_ms", "yardstick_ms", "ratio", "at_most")
        Path(sys.argv[1]).write_text(
            json.dumps([dict(zip(keys, row, strict=True)) for row in rows], indent=1)
        )


def one_file() -> tuple[str, float, float, float, float]:
    """`samestrut audit` of one file, the whole process, beside importing pydantic and yaml and parsing that file."""
    with tempfile.TemporaryDirectory() as folder:
        path = Path(folder) / "beam.yaml"
        path.write_text(hundred_lines(), encoding="utf-8")
        installed = Path(folder) / "cache"
        environment = {**os.environ, "PYTHONDONTWRITEBYTECODE": "", "PYTHONPYCACHEPREFIX": str(installed)}
        plain = f"import pydantic, yaml; yaml.load(open({str(path)!r}), yaml.CSafeLoader)"
        ours = [sys.executable, "-m", "checker", "audit", str(path)]
        times = alternate(
            lambda: _run(ours, environment), lambda: _run([sys.executable, "-c", plain], environment), ROUNDS
        )
    return ("audit of one 100-line file, whole process / import pydantic and yaml, parse it", *times, 2.0)


def hundred_lines() -> str:
    """The sound example with its first case repeated until the file has a hundred lines."""
    text = (ROOT / "examples/market-hall/edge-beam-sound.yaml").read_text(encoding="utf-8")
    head, cases = text.split("cases:\n")
    block = cases[: cases.index("  - name: ULS-2")]
    number = 0
    text = head + "cases:\n"
    while text.count("\n") < 100:
        number += 1
        text += block.replace("ULS-1", f"ULS-{number}")
    return text


def _run(command: list[str], environment: dict[str, str]) -> None:
    subprocess.run(command, cwd=ROOT, env=environment, stdout=subprocess.DEVNULL, check=False)


def page() -> tuple[str, float, float, float, float]:
    """The page of a hundred members with a thousand findings, beside the same page without its drawings."""
    from unittest.mock import patch

    from checker import audit, load
    from checker.page.page import html_of

    design = load(ROOT / "examples/market-hall/edge-beam-mistakes.yaml")
    report = audit([design._replace(member=f"EB-{number:03}") for number in range(100)])
    assert len(report.findings) >= 1000
    size = len(html_of(report).encode())
    assert size < 6_000_000, size

    def bare() -> str:
        with patch("checker.page.member._drawings", lambda member, index: ("", set())):
            return html_of(report)

    times = alternate(lambda: html_of(report), bare, 5)
    return (
        f"page of {len(report.findings)} findings, {size / 1e6:.1f} MB / the same without drawings",
        *times,
        2.5,
    )


def columns() -> list[tuple[str, float, float, float, float]]:
    """10,000 member-cases in memory: recompute everything, beside the same formulas by hand in numpy."""
    from checker.review.engine import engine
    from checker.sheet.columns import run_columns

    compiled = engine("EN 1992-1-1:2004", "recommended", ("rectangle",), columns=True)
    table = random_rows(ROWS)
    wanted = [name for name in recompute_by_hand(table) if name in compiled.sheet.quantities]
    by_hand = recompute_by_hand(table)
    found = run_columns(compiled.scratch, table, wanted, ROWS)
    for name in wanted:  # a yardstick that computes something else measures nothing
        np.testing.assert_allclose(
            found[name], np.asarray(by_hand[name], dtype=float), rtol=1e-9, err_msg=name
        )
    times = alternate(
        lambda: run_columns(compiled.scratch, table, wanted, ROWS), lambda: recompute_by_hand(table), ROUNDS
    )
    return [
        (f"{ROWS:,} member-cases in memory, all quantities / the same formulas by hand in numpy", *times, 3.0)
    ]


def random_rows(rows: int) -> dict[str, object]:
    """Random solid rectangles with upright links, as columns of the sheet's inputs."""
    from checker.geometry.bending import ProfileColumns
    from checker.geometry.profile import Profile

    rng = np.random.default_rng(20261201)

    def between(low: float, high: float) -> np.ndarray:
        return rng.uniform(low, high, rows)

    b, h = between(250, 600), between(450, 1100)
    a_s, d_2 = between(45, 75), between(45, 70)
    A_b, A_t = between(900, 3500), between(600, 2500)
    nan = np.full(rows, np.nan)
    profiles = [
        Profile(((0.0, hi, bi, bi),), ((0.0, hi, bi, bi),), ((ai, Abi), (hi - di, Ati)), hi, hi / 2)
        for bi, hi, ai, di, Abi, Ati in zip(b, h, a_s, d_2, A_b, A_t, strict=True)
    ]
    table: dict[str, object] = {
        "b": b, "h": h, "b_least": np.minimum(b, h), "y_c": h / 2, "A_c": b * h, "c_axis": np.maximum(a_s, d_2),
        "a_s_bottom": a_s, "a_s_top": d_2, "A_s_bottom": A_b, "A_s_top": A_t, "A_half_bottom": A_b + 200,
        "A_half_top": A_t + 200, "b_w_sagging": b, "b_w_hogging": b, "b_t_sagging": b, "b_t_hogging": b,
        "t_wall": np.full(rows, np.inf), "solid_rectangle": np.ones(rows), "narrows_sagging": np.zeros(rows),
        "narrows_hogging": np.zeros(rows), "f_ck": rng.choice([25.0, 30.0, 35.0, 40.0, 55.0], rows),
        "f_yk": np.full(rows, 500.0), "f_ywk": np.full(rows, 500.0), "gamma_C_stated": nan, "gamma_S_stated": nan,
        "link_stress_option": np.zeros(rows), "torsion_counts": np.ones(rows), "V_Ed": between(20e3, 500e3),
        "T_Ed": between(0, 80e6), "M_Ed": between(-300e6, 400e6), "N_Ed": rng.choice([0.0, 0.0, 100e3, -40e3], rows),
        "M_Ed_max": nan, "n_legs": np.full(rows, 2.0), "A_sw_s_all": (legs := between(0.5, 2.5)), "A_leg_s": legs / 2,
        "alpha": np.full(rows, np.pi / 2), "unsaid": nan, "section": ProfileColumns.stack(profiles),
    }  # fmt: skip
    from checker.review.engine import engine

    for name in engine("EN 1992-1-1:2004", "recommended", ("rectangle",), columns=True).scratch.inputs:
        table.setdefault(name, nan)
    claimed = between(1.0, 2.5)
    table["cot_theta_shear_declared"] = table["cot_theta_torsion_declared"] = claimed
    return table


def alternate(ours, yardstick, rounds: int) -> tuple[float, float, float]:
    """Medians in ms, and the median of the ratios of neighbouring runs."""
    ours(), yardstick()
    pairs = []
    for _ in range(rounds):
        start = time.perf_counter()
        ours()
        middle = time.perf_counter()
        yardstick()
        pairs.append((middle - start, time.perf_counter() - middle))
    first, second = median(p[0] for p in pairs), median(p[1] for p in pairs)
    return first * 1e3, second * 1e3, median(a / b for a, b in pairs)


if __name__ == "__main__":
    main()
