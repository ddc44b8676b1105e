"""The command line: reads arguments, calls the pipeline, writes what it gives; nothing is worked out here.

- Reports go to standard output, messages to standard error; files are written whole or not at all.
- Exit: 0 accept, with or without remarks; 1 return; 2 wrong use or a file that isn't a valid declared design;
  3 a fault of the tool itself.
"""

from __future__ import annotations

import argparse
import gc
import io
import os
import re
import sys
from collections.abc import Sequence
from pathlib import Path

from checker import __version__
from checker.cli_log import add_log
from checker.errors import InputFaults, SamestrutError, UsageError

SCHEMAS = ("design", "report", "rules", "sheet")
_COLOURS = {"unsafe": "1;31", "breach": "31", "mismatch": "33", "remark": "36"}


def main(arguments: Sequence[str] | None = None) -> int:
    """Run one command and return its exit code."""
    gc.set_threshold(
        50_000
    )  # a short run makes little garbage; looking for it often costs a fifth of the time
    for stream in (sys.stdout, sys.stderr):  # a terminal that can't show θ still gets the rest
        if isinstance(stream, io.TextIOWrapper):
            stream.reconfigure(errors="replace")
    words = list(sys.argv[1:] if arguments is None else arguments)
    options = _parser(words[:1] == ["log"]).parse_args(words)
    try:
        code: int = options.run(options)
        sys.stdout.flush()
        return code
    except InputFaults as error:
        for fault in error.faults:
            print(fault, file=sys.stderr)
        return 2
    except SamestrutError as error:
        print(f"samestrut: {error}", file=sys.stderr)
        return 2
    except BrokenPipeError:
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return 0
    except KeyboardInterrupt:
        print("samestrut: stopped", file=sys.stderr)
        return 130


def _parser(log_wanted: bool) -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(
        prog="samestrut",
        description="Audits declared designs of concrete beams in shear and torsion to Eurocode 2 "
        "and writes a numbered discrepancy report.",
    )
    parser.add_argument("--version", action="version", version=f"samestrut {__version__}")
    commands = parser.add_subparsers(metavar="COMMAND", required=True)

    audit = commands.add_parser("audit", help="audit files or folders and report what is wrong")
    audit.add_argument(
        "paths", nargs="+", metavar="PATH", help="a declared-design file (.yaml, .json) or a folder of them"
    )
    audit.add_argument(
        "-o",
        "--output",
        action="append",
        default=[],
        metavar="FILE",
        help="also write the report to FILE; its ending says the kind: .json, .txt, .html, .pdf, .md, .csv or .xlsx "
        "(comment sheet), .parquet or a .csv with “results” in its name (every quantity); may be repeated",
    )
    audit.add_argument(
        "--annex", metavar="NAME|FILE", help="national annex instead of the one each file names"
    )
    audit.add_argument(
        "--rules", metavar="FILE", help="an office's own rules and limits, laid over the shipped ones"
    )
    audit.add_argument(
        "--previous", metavar="REPORT.json", help="an earlier report: its numbers are kept, changes are told"
    )
    audit.add_argument(
        "--renamed",
        action="append",
        default=[],
        metavar="OLD=NEW",
        help="a member that had another name in it",
    )
    audit.add_argument(
        "--format", choices=("text", "json"), default="text", help="what goes to standard output"
    )
    audit.add_argument(
        "-v", "--workings", action="store_true", help="add the right working under each finding"
    )
    audit.add_argument(
        "-q", "--quiet", action="store_true", help="print no report, only write files and set the exit code"
    )
    audit.set_defaults(run=_audit)

    new = commands.add_parser("new", help="print a commented declared-design file to fill in")
    new.set_defaults(run=_new)

    rules = commands.add_parser("rules", help="list the rules, or explain one")
    rules.add_argument("id", nargs="?", metavar="ID")
    rules.add_argument("--rules", metavar="FILE", help="an office's own rules, laid over the shipped ones")
    rules.set_defaults(run=_rules)

    sheet = commands.add_parser("sheet", help="list the formulas, or show one")
    sheet.add_argument("symbol", nargs="?", metavar="SYMBOL")
    sheet.add_argument("--annex", metavar="NAME|FILE", default="recommended")
    shapes = ("rectangle", "box", "circle", "polygon", "tee", "ell", "i")
    sheet.add_argument("--shape", choices=shapes, default="rectangle")
    sheet.add_argument("--parts", action="store_true", help="web and flanges share the torsion")
    sheet.set_defaults(run=_sheet)

    slips = commands.add_parser(
        "slips", help="list the classical mistakes that are recognised, or explain one"
    )
    slips.add_argument("id", nargs="?", metavar="ID")
    slips.add_argument("--rules", metavar="FILE", help="an office's own slips, laid over the shipped ones")
    slips.set_defaults(run=_slips)

    add_log(commands, wanted=log_wanted)

    schema = commands.add_parser("schema", help="print the JSON Schema of a file this tool reads or writes")
    schema.add_argument("name", choices=SCHEMAS, metavar="NAME", help=", ".join(SCHEMAS))
    schema.set_defaults(run=_schema)
    return parser


def _audit(options: argparse.Namespace) -> int:
    from checker.outputs.writers import writer_of
    from checker.pipeline import audit
    from checker.progress import progress_on_terminal

    writers = {path: writer_of(path) for path in options.output}
    for path in writers:
        if any(_same_file(path, given) for given in options.paths):
            raise UsageError(f"{path}: is one of the files to audit; write the report elsewhere")
    progress = progress_on_terminal(quiet=options.quiet)
    report = audit(
        options.paths, annex=options.annex, rules=options.rules, progress=progress, previous=options.previous,
        renamed=_renamed(options.renamed),
    )  # fmt: skip
    for fault in report.faults:
        print(fault, file=sys.stderr)
    for path, writer in writers.items():
        write_whole(Path(path), writer(report, options.workings))
    if not options.quiet and options.format == "json":
        sys.stdout.write(report.to_json())
    elif not options.quiet and report.members:
        sys.stdout.write(_coloured(report.text(workings=options.workings)))
    return report.exit_code


def _renamed(pairs: list[str]) -> dict[str, str]:
    """`OLD=NEW` as given on the command line."""
    found = {}
    for pair in pairs:
        old, sign, new = pair.partition("=")
        if not (old and sign and new):
            raise UsageError(f"--renamed {pair}: expected OLD=NEW")
        found[old] = new
    return found


def _same_file(output: str, given: str) -> bool:
    """Whether a report would be written over a file that is to be audited, named alone or lying in a folder."""
    target, source = Path(output).resolve(), Path(given).resolve()
    return target == source or (target.exists() and source.is_dir() and source in target.parents)


def write_whole(path: Path, content: str | bytes) -> None:
    """Write a file whole or not at all: to a temporary file beside it, then renamed.

    Raises:
        UsageError: the file can't be written, and why.
    """
    import tempfile

    try:
        handle, temporary = tempfile.mkstemp(dir=path.parent, prefix=f".{path.name}.", suffix=".part")
        try:
            with os.fdopen(handle, "wb") as stream:
                stream.write(content.encode("utf-8") if isinstance(content, str) else content)
                stream.flush()
                os.fsync(stream.fileno())
            mask = os.umask(0)
            os.umask(mask)
            os.chmod(temporary, 0o666 & ~mask)
            os.replace(temporary, path)
        except BaseException:
            os.unlink(temporary)
            raise
    except OSError as error:
        raise UsageError(f"{path}: can't be written: {error.strerror}") from None


def _coloured(text: str) -> str:
    """Colour on a terminal only, and not where NO_COLOR is set."""
    if not sys.stdout.isatty() or os.environ.get("NO_COLOR"):
        return text

    def paint(found: re.Match[str]) -> str:
        return f"\x1b[{_COLOURS[found[2].lower()]}m{found[1]}{found[2]}\x1b[0m"

    return re.sub(r"(?m)^(No\. \d+  )(UNSAFE|BREACH|MISMATCH|REMARK)", paint, text)


def _new(options: argparse.Namespace) -> int:
    from checker.declared.template import template

    sys.stdout.write(template())
    return 0


def _rules(options: argparse.Namespace) -> int:
    from checker.report.catalogue_text import rule_list
    from checker.report.rule_text import rule_text
    from checker.review.catalogue import load_catalogue

    catalogue = load_catalogue(Path(options.rules) if options.rules else None, options.rules or "")
    if options.id is None:
        sys.stdout.write(rule_list(catalogue))
        return 0
    if options.id not in catalogue.rules:
        raise UsageError(_unknown("rule", options.id, catalogue.rules))
    sys.stdout.write(rule_text(catalogue.rules[options.id]))
    return 0


def _sheet(options: argparse.Namespace) -> int:
    from checker.report.catalogue_text import quantity_list, quantity_text
    from checker.review.engine import shape_layers, sheet_under

    standard = "EN 1992-1-1:2004"
    sheet = sheet_under(
        standard, options.annex, shape_layers(options.shape, aslant=False, parts=options.parts)
    )
    if options.symbol is None:
        sys.stdout.write(quantity_list(sheet))
        return 0
    if options.symbol not in sheet.quantities:
        raise UsageError(_unknown("symbol", options.symbol, sheet.quantities))
    sys.stdout.write(quantity_text(sheet, options.symbol))
    return 0


def _slips(options: argparse.Namespace) -> int:
    from checker.report.catalogue_text import slip_list, slip_text
    from checker.review.slips import load_slips

    slips = {slip.id: slip for slip in load_slips(Path(options.rules) if options.rules else None).slips}
    if options.id is None:
        sys.stdout.write(slip_list(slips.values()))
        return 0
    if options.id not in slips:
        raise UsageError(_unknown("slip", options.id, slips))
    sys.stdout.write(slip_text(slips[options.id]))
    return 0


def _unknown(what: str, word: str, known: object) -> str:
    import difflib

    near = difflib.get_close_matches(word, list(known), 3)  # type: ignore[call-overload]
    hint = f"; did you mean {', '.join(near)}?" if near else ""
    return f"no {what} {word!r}{hint}"


def _schema(options: argparse.Namespace) -> int:
    from checker import shipped

    sys.stdout.write((shipped.folder("schemas") / f"{options.name}.schema.json").read_text(encoding="utf-8"))
    return 0


if __name__ == "__main__":
    raise SystemExit(main())
