"""The `log` commands: add, show, verify, head."""

from __future__ import annotations

import argparse
import sys
from pathlib import Path
from typing import Any

from checker.log import ACTIONS


def add_log(commands: Any, *, wanted: bool) -> None:
    """Add `log` to the parser's commands; its own commands only where it is `wanted`, so that no other pays for them."""
    log = commands.add_parser("log", help="keep the sign-off log: add, show, verify, head")
    if not wanted:
        return
    kinds = log.add_subparsers(metavar="WHAT", required=True)
    add = kinds.add_parser("add", help="add an entry about a report")
    add.add_argument("log", metavar="LOG")
    add.add_argument("action", choices=ACTIONS)
    add.add_argument("--report", required=True, metavar="REPORT.json")
    add.add_argument("--person", required=True, metavar="NAME")
    add.add_argument("--role", default="", metavar="ROLE", help="in which capacity")
    add.add_argument("--note", default="", metavar="TEXT")
    add.add_argument(
        "--same-person-because", default="", metavar="REASON", help="why the checker may approve"
    )
    add.set_defaults(run=_add)
    show = kinds.add_parser("show", help="list the entries")
    show.add_argument("log", metavar="LOG")
    show.add_argument("--action", default="", metavar="ACTION", help="only entries of this action")
    show.add_argument("--member", default="", metavar="MEMBER", help="only entries that name this member")
    show.set_defaults(run=_show)
    verify = kinds.add_parser("verify", help="say whether the log holds, and the first entry that doesn't")
    verify.add_argument("log", metavar="LOG")
    verify.add_argument(
        "--head", metavar="DIGEST", help="the head noted elsewhere, e.g. on the sign-off sheet"
    )
    verify.set_defaults(run=_verify)
    head = kinds.add_parser("head", help="print the digest to note on the sign-off sheet")
    head.add_argument("log", metavar="LOG")
    head.set_defaults(run=_head)


def _add(options: argparse.Namespace) -> int:
    from checker.log.sign import add

    entry = add(
        Path(options.log), options.action, options.person, options.role, Path(options.report), note=options.note,
        same_person=options.same_person_because,
    )  # fmt: skip
    print(f"entry {entry['sequence']}: {entry['action']} by {entry['person']}; head {entry['digest']}")
    return 0


def _show(options: argparse.Namespace) -> int:
    from tabulate import tabulate

    from checker.log.journal import entries

    rows = []
    for entry in entries(Path(options.log)):
        if options.action not in ("", entry["action"]) or options.member not in entry["member"]:
            continue
        opened = ", ".join(map(str, entry["open"])) or "–"
        rows.append([entry["sequence"], entry["time"], entry["action"], entry["person"], entry["member"],
                     entry["revision"], entry["outcome"], opened, entry["note"]])  # fmt: skip
    heads = ["no.", "time (UTC)", "action", "person", "member", "revision", "outcome", "open", "note"]
    print(tabulate(rows, heads, tablefmt="plain", disable_numparse=True))
    return 0


def _verify(options: argparse.Namespace) -> int:
    from checker.log.journal import BrokenLogError
    from checker.log.verify import verify

    try:
        count, head = verify(Path(options.log), options.head)
    except BrokenLogError as error:
        print(f"does not hold: {error}", file=sys.stderr)
        return 1
    print(f"{count} entries hold; head {head}")
    if options.head is None:
        print(
            "Whether entries were cut off at the end shows only against a head that was noted elsewhere (--head)."
        )
    return 0


def _head(options: argparse.Namespace) -> int:
    from checker.log.verify import verify

    print(verify(Path(options.log))[1])
    return 0
