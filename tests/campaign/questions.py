"""The questions of the campaign about values: each works one design from a seed and counts what is found."""

from __future__ import annotations

from collections.abc import Mapping
from random import Random

from tests.campaign.misread import MISREAD, gives
from tests.campaign.seen import Seen, Tally, look
from tests.campaign.worked import TOLERANCE, Job, Sheet, Wrong, draw_job
from tests.campaign.wrong import WRONG, own

FINAL = ("A_sw_s_total", "crush_sum", "A_sl_torsion", "M_Rd")
SHARES = ("all", "half", "quarter", "final")
IDS = sorted(WRONG)

BESIDE = {
    "link-stress-full-with-option": {"f_ywd"},
    "nu-1-of-06": {"f_ywd"},
    "link-stress-08-with-nu": {"nu_1"},
}
"""A ν_1 of 0.6 is right where the links are held to 0.8 f_ywk (6.2.3(3)): each is wrong only beside the other."""


def kept(rng: Random, job: Job, share: str) -> set[str]:
    """The values that a designer declares; choices that the others rest on stay."""
    symbols = [s for s in job.case.declared if "theta" not in s]
    fixed = job.design.fixed & set(symbols)
    if share == "all":
        return set(symbols)
    if share == "final":
        last = rng.choice(("A_sl_torsion", "M_Rd"))
        return {s for s in symbols if s in ("A_sw_s_total", "crush_sum", last)} | fixed
    chance = {"half": 0.5, "quarter": 0.25}[share]
    return {s for s in symbols if rng.random() < chance} | fixed


def clean(seed: int, tally: Tally) -> None:
    rng = Random(f"clean {seed}")
    job = draw_job(rng)
    printed = job.work().printed
    for share in SHARES:
        keep = kept(rng, job, share)
        seen = look(job.text({s: t for s, t in printed.items() if s in keep}, "adequate"))
        tally.count(f"clean, {share}", not seen.complaints, f"clean {seed}", seen.told())


def made(job: Job, slips: list[str]) -> dict[str, Wrong]:
    return {symbol: formula for slip in slips for symbol, formula in WRONG[slip].items()}


def shows(
    job: Job, sheet: Sheet, wrong: Mapping[str, Wrong], symbols: set[str], declared: set[str], sure: bool
) -> bool:
    """Whether one of the printed values is moved; `sure` counts the rounding it inherits as well."""
    job = job.held_to(sheet, declared)
    moved = [s for s in sorted(symbols & set(sheet.printed)) if job.moved(sheet, s)]
    return any(not sure or job.surely_moved(s, sheet, wrong, declared) for s in moved)


def _found(
    job: Job, sheet: Sheet, wrong: Mapping[str, Wrong], seen: Seen, own_: set[str], keep: set[str]
) -> bool | None:
    """Found; None where nothing is shown beyond what rounding may hide."""
    if seen.found:
        return True
    return False if shows(job, sheet, wrong, own_, keep, True) else None


def same(job: Job, sheet: Sheet, slip: str, seen: Seen) -> bool:
    """Whether the slip named first gives the same values on this design within their rounding."""
    firsts = [root.slip for root in seen.roots if root.quantity in own(slip) and root.slip in WRONG]
    if not firsts or not seen.named(slip):
        return False
    other = job.work(WRONG[firsts[0] or ""]).carried
    return all(
        abs(other[s] - sheet.carried[s]) <= 2 * job.half_step(s)
        for s in WRONG[slip]
        if s in sheet.printed and job.moved(sheet, s)
    )


def in_doubt(job: Job, sheet: Sheet, slip: str, seen: Seen) -> bool:
    """Whether another slip that is named gives just the printed values, so that nobody could tell which it was."""
    others = {name for root in seen.roots for name in root.slips if name in WRONG} - {slip}
    return any(
        all(abs(job.work(WRONG[name]).carried[s] - sheet.carried[s]) <= 2 * job.half_step(s) for s in moved)
        for name in others
        if (moved := [s for s in WRONG[slip] if s in sheet.printed and job.moved(sheet, s)])
    )


def one_slip(seed: int, tally: Tally) -> None:
    slip = IDS[seed % len(IDS)]
    which = f"one {seed} {slip}"
    rng = Random(which)
    drawn = possible(rng, [slip])
    if drawn is None:
        return
    job, sheet, wrong = drawn
    seen = look(job.text(sheet.printed))
    found = _found(job, sheet, wrong, seen, set(WRONG[slip]), set(sheet.printed))
    if found is None:
        return
    told = seen.told()
    tally.count("one slip: found", found, which, told)
    tally.count("one slip: root right", seen.stands_on(own(slip)), which, told)
    tally.count("one slip: one root", len(seen.roots) == 1, which, told)
    tally.count(
        "one slip: first, or one of the same value",
        seen.first(slip) or same(job, sheet, slip, seen),
        which,
        told,
    )
    tally.count("one slip: first of all (no bound)", seen.first(slip), which, told)
    if not in_doubt(job, sheet, slip, seen):
        tally.count("one slip: first, where no other gives the same values", seen.first(slip), which, told)
    tally.count("one slip: named", seen.named(slip), which, told)


def possible(rng: Random, slips: list[str], tries: int = 40) -> tuple[Job, Sheet, dict[str, Wrong]] | None:
    """A design in which each of the slips moves a value of its own; None where none is met."""
    for _ in range(tries):
        job = draw_job(rng)
        wrong = made(job, slips)
        try:
            sheet = job.work(wrong)
        except (ZeroDivisionError, ValueError):
            continue
        if any(float(text) < 0 for text in sheet.printed.values()):
            continue
        if all(shows(job, sheet, wrong, set(WRONG[slip]), set(), False) for slip in slips) and apart(
            job, sheet, slips
        ):
            return job, sheet, wrong
    return None


def apart(job: Job, sheet: Sheet, slips: list[str]) -> bool:
    """Whether each of several slips still moves a value of its own beside the others."""
    for slip in slips if len(slips) > 1 else ():
        without = job.work(made(job, [other for other in slips if other != slip])).carried
        if not any(
            abs(sheet.carried[s] - without[s])
            > 3 * job.half_step(s) + 2 * TOLERANCE.get(s, 0.01) * abs(without[s])
            for s in WRONG[slip]
            if s in sheet.printed
        ):
            return False
    return True


def one_slip_in_part(seed: int, tally: Tally) -> None:
    slip = IDS[seed % len(IDS)]
    which = f"part {seed} {slip}"
    rng = Random(which)
    drawn = possible(rng, [slip])
    if drawn is None:
        return
    job, sheet, wrong = drawn
    for share in SHARES[1:]:
        keep = kept(rng, job, share)
        keep |= BESIDE.get(slip, set())
        if not shows(job, sheet, wrong, keep, keep, False):
            continue
        seen = look(job.text({s: t for s, t in sheet.printed.items() if s in keep}))
        found = _found(job, sheet, wrong, seen, keep, keep)
        if found is None:
            continue
        told = f"{seen.told()} [{' '.join(s for s in sheet.printed if s in keep)}]"
        tally.count(f"{share}: found", found, which, told)
        tally.count(f"{share}: named", seen.named(slip), which, told)
        one = len(seen.roots) == 1 and seen.stands_on(own(slip))
        tally.count(f"{share}: one cause", one, which, told)


def two_slips(seed: int, tally: Tally) -> None:
    which = f"two {seed}"
    rng = Random(which)
    slips = rng.sample(IDS, 2)
    if own(slips[0]) & own(slips[1]):
        return
    drawn = possible(rng, slips)
    if drawn is None:
        return
    job, sheet, _ = drawn
    seen = look(job.text(sheet.printed))
    told = f"{slips}: {seen.told()}"
    tally.count("two slips: both roots", all(seen.stands_on(own(slip)) for slip in slips), which, told)
    tally.count("two slips: both named", all(seen.named(slip) for slip in slips), which, told)


def unknown(seed: int, tally: Tally) -> None:
    """A factor that no slip gives, on one value."""
    which = f"unknown {seed}"
    rng = Random(which)
    job = draw_job(rng)
    symbols = [s for s in job.case.declared if "theta" not in s and s != "z" and job.right[s] > 0]
    symbol, factor = rng.choice(symbols), rng.uniform(0.7, 1.4)
    wrong: dict[str, Wrong] = {symbol: lambda x: x.right * factor}
    sheet = job.work(wrong)
    if not job.moved(sheet, symbol):
        return
    seen = look(job.text(sheet.printed))
    found = _found(job, sheet, wrong, seen, {symbol}, set(sheet.printed))
    if found is None:
        return
    tally.count("unknown: found", found, which, f"{symbol} {factor:.3f}: {seen.told()}")
    tally.count(
        "unknown: root right", seen.stands_on({symbol}), which, f"{symbol} {factor:.3f}: {seen.told()}"
    )
    for root in seen.roots:
        near = not root.slips or lands(job, sheet, symbol, root.slips)
        tally.count("unknown: names land", near, which, f"{symbol} {factor:.3f}: {seen.told()}")


def lands(job: Job, sheet: Sheet, symbol: str, slips: tuple[str, ...]) -> bool:
    """Whether each slip named gives the declared value: within its rounding and that of what stands above it."""
    declared = float(sheet.printed[symbol]) * (job.half_step(symbol) / (0.5 * 10.0 ** -job.decimals(symbol)))
    for names in slips:
        if names in MISREAD:
            if not gives(job, names, symbol, declared, job.half_step(symbol) + 1e-3 * abs(declared)):
                return False
            continue
        parts = [name for name in names.split(" + ") if name in WRONG]
        if not parts:
            return False
        wrong = made(job, parts)
        value = job.work(wrong).carried[symbol]
        slack = job.half_step(symbol) + job.inherited(symbol, wrong, set(sheet.printed))
        if not abs(value - declared) <= 1.05 * slack + 1e-3 * abs(declared):
            return False
    return True


def rounded_work(seed: int, tally: Tally) -> None:
    """Designers who go on with rounded numbers, or take 0.87, 1.33 or a rounded angle; none of it is an error."""
    which = f"rounded {seed}"
    rng = Random(which)
    job = draw_job(rng)
    m = job.m
    habits: dict[str, dict[str, Wrong]] = {
        "0.87 for 1/1.15": {
            "f_yd": lambda x: 0.87 * m.f_yk,
            **({} if m.low_stress else {"f_ywd": lambda x: 0.87 * m.f_ywk}),
        },
        "1.33 for 4/3": {"f_cd": lambda x: round(m.f_ck / 1.5, 1)},
        "rounded": {},
    }
    for habit, wrong in habits.items():
        goes_on = Job(job.design, job.case, job.cot, job.z, exact=False)
        sheet = goes_on.work(wrong)
        for share in ("all", "half"):
            keep = kept(rng, job, share)
            seen = look(job.text({s: t for s, t in sheet.printed.items() if s in keep}))
            tally.count(f"habits: {habit}", not seen.complaints, which, f"{share} {seen.told()}")
