"""The questions of the campaign about strut angles: windows, what holds, gravity, and the reserve, against a scan."""

from __future__ import annotations

from dataclasses import replace
from math import atan, degrees
from random import Random

from checker.declared.build import load_text
from checker.pipeline import audit
from checker.review.window import Window
from tests.campaign.questions import IDS, made
from tests.campaign.scan import HIGH, LOW, Truss, reserve, window
from tests.campaign.seen import Tally, look
from tests.campaign.worked import Job, draw_job
from tests.campaign.wrong import WRONG
from tests.properties.members import SHAPES
from tests.properties.sound import SoundCase

CLOSE = 1e-5


def windows_of(truss: Truss) -> dict[str, tuple[float, float] | None]:
    parts = {"links": truss.links, "concrete": truss.concrete, "bars": truss.bars}
    found = {name: window(part) for name, part in parts.items()}
    found["admissible"] = window(lambda cot: min(part(cot) for part in parts.values()))
    return found


def expected(truss: Truss, cot: float) -> tuple[str, bool]:
    """What the scan says of a claimed angle, and whether that is too close to an edge to tell."""
    span = windows_of(truss)["admissible"]
    near = abs(truss.right["M_Rd"] / truss.a.M - 1) < CLOSE if truss.a.M else False
    if span is None or not truss.bends():
        return "on no angle", near
    near |= any(abs(edge - cot) < CLOSE for edge in span if LOW < edge < HIGH)
    return ("as claimed" if span[0] <= cot <= span[1] else "on another angle"), near


def truss_of(job: Job, z: float | None) -> Truss:
    """With the lever arm z (mm) that is declared, cut back to the largest that may be used."""
    return Truss(job.m, job.case.actions, None if z is None else min(z, job.most_z))


def changed(rng: Random, job: Job) -> Job:
    """The same member under other actions and another spacing, so that it may fail in any way."""
    a = job.case.actions
    actions = replace(a, V=round(a.V * rng.uniform(0.3, 2.2), -3), T=round(a.T * rng.uniform(0.3, 2.2), -5))
    actions = replace(actions, M=round(a.M * rng.uniform(0.2, 1.3), -6))
    if a.M_max is not None or rng.random() < 0.2:
        actions = replace(actions, M_max=round(actions.M * rng.uniform(1.0, 1.2), -6))
        if actions.M_max is None or actions.M_max <= actions.M:
            actions = replace(actions, M_max=None)
    if (a.hogging or a.N) and actions.M == 0:
        actions = replace(actions, M=1e6)
    return reworked(job, actions, float(max(40, round(job.m.spacing * rng.uniform(0.6, 1.6) / 5) * 5)))


def reworked(job: Job, actions: object, spacing: float) -> Job:
    """The job with other actions and another link spacing, its file rewritten to match."""
    member = replace(job.m, spacing=spacing)
    old = f"    spacing: {job.m.spacing:g}"
    links = [f"    spacing: {spacing:g}" if line == old else line for line in job.design.links]
    case = SoundCase(actions, job.case.declared, "")  # type: ignore[arg-type]
    return Job(replace(job.design, member=member, links=links, cases=[case]), case, job.cot, job.z, job.exact)


def windows(seed: int, tally: Tally) -> None:
    which = f"window {seed}"
    rng = Random(which)
    job = changed(rng, draw_job(rng, SHAPES[seed % len(SHAPES)]))
    option = {s: job.case.declared[s] for s in ("f_ywd", "nu_1") if job.m.low_stress}
    lever = {"z": job.case.declared["z"]} if job.z is not None else {}
    text = job.text({**option, **lever})
    (case,) = audit(load_text(text, "campaign.yaml")).members[0].cases
    if case.values["M_Eds"] > case.values["M_lim"]:
        return  # needs compression bars, for which the chain of formulas has no lever arm
    truss = truss_of(job, job.z)
    scanned = windows_of(truss)
    for name, span in scanned.items():
        tally.count(
            f"window of {name}: within 0.01°", _same(getattr(case.window, name), span), which, f"{span}"
        )
    holds, near = expected(truss, job.cot)
    if not near:
        tally.count("window: holds", case.window.holds == holds, which, f"{case.window} / {scanned}")
    if not job.case.actions.N and (job.case.actions.V or job.case.actions.T):
        _reserves(tally, which, truss, job.cot, case.values)


def _reserves(tally: Tally, which: str, truss: Truss, cot: float, values: object) -> None:
    for name, angle in (("used", cot), ("best", None)):
        scanned = min(1000.0, reserve(truss, angle))
        said = values[f"reserve_{name}"]  # type: ignore[index]
        told = f"{name}: {said} scanned {scanned}, without links {truss.without_links}"
        tally.count(f"reserve {name}: within 1e-4", abs(said - scanned) <= 1e-4 * scanned, which, told)


def _same(said: tuple[float, float] | None, scanned: tuple[float, float] | None) -> bool:
    """Both open, or both shut (a span of no width may be either), or the same to a hundredth of a degree."""
    if said is None or scanned is None:
        span = said or scanned
        return span is None or span[1] - span[0] < CLOSE
    return all(abs(degrees(atan(1 / a) - atan(1 / b))) <= 0.01 for a, b in zip(said, scanned, strict=True))


def steel_by_slip(seed: int, tally: Tally) -> None:
    """Links and bars just enough for the wrong numbers: does the member hold, and is it called unsafe where not?"""
    slip = IDS[seed % len(IDS)]
    which = f"steel {seed} {slip}"
    rng = Random(which)
    job = draw_job(rng)
    if job.case.actions.M_max is not None:
        return
    job = _built_to(job, slip)
    sheet = job.work(made(job, [slip]))
    if "z" in sheet.printed and job.z is None:
        sheet.printed.pop("z")
    stated = {s: t for s, t in sheet.printed.items() if s not in ("f_ywd", "nu_1") or job.m.low_stress}
    if slip in ("gamma-s-left-out", "gamma-c-for-steel") or {"f_ywd", "nu_1"} & set(WRONG[slip]):
        stated = {s: t for s, t in job.work().printed.items() if s in job.design.fixed}
    if any(float(text) < 0 for text in stated.values()):
        return
    seen = look(job.text(stated))
    lever = float(stated["z"]) if "z" in stated else None
    holds, near = expected(truss_of(job, lever), job.cot)
    if near:
        return
    window_: Window = seen.member.cases[0].window
    gravities = {f.draft.gravity for f in seen.member.findings}
    told = f"{window_.holds} for {holds}, {sorted(gravities)}"
    tally.count("steel by slip: holds", window_.holds == holds, which, told)
    tally.count("steel by slip: unsafe", ("unsafe" in gravities) == (holds == "on no angle"), which, told)


def _built_to(job: Job, slip: str) -> Job:
    """Actions grown until the wrong numbers just use up the bars and struts, links then spaced by them."""
    chord = Truss(job.m, job.case.actions).chord

    def uses(job: Job) -> float:
        v = job.work(made(job, [slip])).carried
        moment = job.case.actions.M / v["M_Rd"] if v["M_Rd"] else 0.0
        return max(v["A_s_tension"] / chord.A_tension, v["crush_sum"], moment)

    low, high, a = 1.0, 4.0, job.case.actions

    def grown(by: float, spacing: float) -> Job:
        return reworked(
            job, replace(a, V=round(a.V * by, -2), T=round(a.T * by, -4), M=round(a.M * by, -4)), spacing
        )

    for _ in range(14):
        middle = (low + high) / 2
        low, high = (middle, high) if uses(grown(middle, job.m.spacing)) <= 1 else (low, middle)
    built = grown(low, job.m.spacing)
    v = built.work(made(built, [slip])).carried
    spacing = min(
        job.m.legs / v["A_sw_s_total"] if v["A_sw_s_total"] > 0 else 400.0,
        job.m.leg / v["A_sw_s_torsion"] if v["A_sw_s_torsion"] > 0 else 400.0,
        400.0,
    )
    return grown(low, float(max(30, int(spacing))))
