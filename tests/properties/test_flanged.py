"""Whatever a valid file with a tee, ell or i says, the audit ends in a report without a crashed check, valid as JSON."""

from __future__ import annotations

import json
from pathlib import Path
from random import Random
from typing import Any

import jsonschema
import pytest

from checker import audit
from checker.declared.build import load_text
from checker.errors import InputFaults
from checker.report.document import json_text

SCHEMA = json.loads(
    (Path(__file__).parents[2] / "schemas" / "report.schema.json").read_text(encoding="utf-8")
)
DESIGNS = 200
VALIDATOR = jsonschema.Draft202012Validator(SCHEMA)


def _refuse(constant: str) -> None:
    raise ValueError(f"{constant} is no JSON")


def wild(r: Random) -> dict[str, Any]:
    shape = r.choice(("tee", "ell", "i"))
    b_w, h = r.choice((120, 300, 800)), r.choice((200, 600, 1500))
    section: dict[str, Any] = {"shape": shape, "b_w": b_w, "h": h, "b_f": b_w + r.choice((1, 100, 700, 5000))}
    section["h_f"] = r.choice((30, 90, 180, h - 20, h // 2))
    section["torsion_by"] = r.choice(("web", "parts", "parts"))
    if shape == "i":
        section |= {"b_f_bottom": b_w + r.choice((10, 400)), "h_f_bottom": r.choice((40, 100, h // 3))}
    else:
        section["flange"] = r.choice(("top", "bottom"))
    links = [
        {
            "mark": "L1",
            "diameter": 8,
            "spacing": r.choice((80, 300)),
            "legs": r.choice((2, 4)),
            "angle": r.choice((90, 60)),
        }
    ]
    if r.random() < 0.5:
        links.append({"mark": "L2", "diameter": 6, "spacing": 100, "legs": 2, "place": "flange"})
    bars: list[dict[str, Any]] = [{"face": "bottom", "bars": "2H16"}, {"face": "top", "bars": "2H16"}]
    if r.random() < 0.5:
        x, y = r.choice((30, section["b_f"] - 30)), r.choice((30, h - 30))
        bars.append({"face": r.choice(("top", "bottom")), "diameter": 10, "at": [[x, y]]})
    actions = (0, 1e-3, 40, -300, 1e6)
    case: dict[str, Any] = {"name": "A"} | {
        key: r.choice(actions) for key in ("V_Ed", "T_Ed", "M_Ed", "N_Ed")
    }
    if r.random() < 0.5:
        case["web_flange"] = {
            "dF": r.choice((0, 100, 1e6)),
            "dx": r.choice((1, 900)),
            "A_sf_s": r.choice((0, 0.5)),
        }
    case["declared"] = r.choice(
        ({}, {"theta": 30}, {"A_k": 1e5, "T_Rd_max": 10, "t_ef": 80, "A_s_tension": 900, "crush_sum": 0.4})
    )
    tree = {"format": 1, "member": "W", "section": section, "materials": {"f_ck": r.choice((12, 30, 90)), "f_yk": 500},
            "cover": r.choice((5, 25)), "links": links, "bars": bars, "cases": [case]}  # fmt: skip
    if r.random() < 0.5:
        tree["spans"] = {"l_0": r.choice((1, 4000)), "b_1": r.choice((0, 500))}
    return tree


@pytest.mark.parametrize("block", range(4))
def test_no_check_crashes(block: int) -> None:
    r = Random(f"flanged {block}")
    audited = 0
    for _ in range(DESIGNS // 4):
        text = json.dumps(wild(r))
        try:
            design = load_text(text, "wild.json")
        except InputFaults:
            continue
        report = audit(design)
        (member,) = report.members
        assert [check for check in member.checks if check.status == "crashed"] == [], text
        VALIDATOR.validate(json.loads(json_text(report), parse_constant=_refuse))
        audited += 1
    assert audited > DESIGNS // 12
