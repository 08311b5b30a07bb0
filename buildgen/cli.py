"""The commands. Progress goes to stderr, results to stdout.

Exit status: 0 fine; 1 built, but a check failed; 2 the input is wrong; 3 an internal fault.
"""

from __future__ import annotations

import argparse
import json
import os
import sys
import traceback
from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING, Any

from buildgen import __version__
from buildgen.problems import DesignError, Problem

if TYPE_CHECKING:
    from buildgen.build import Build

FINE, CHECK_FAILED, WRONG_INPUT, INTERNAL = 0, 1, 2, 3
DEMO = "marram"


def parser() -> argparse.ArgumentParser:
    """Every command with its options."""
    top = argparse.ArgumentParser(
        prog="buildgen",
        description="From one definition of a small electric aeroplane to its build package.",
    )
    top.add_argument("--version", action="version", version=f"buildgen {__version__}")
    commands = top.add_subparsers(dest="command", required=True, metavar="COMMAND")
    for name, help, run in (
        ("packet", "everything, into DIR/<name>/", packet),
        ("cut", "cut sheets and stick list only", cut),
        ("mounts", "printable parts only", mounts),
        ("balance", "weights and centre of gravity", balance),
        ("check", "every check; the exit status tells", check),
    ):
        sub = commands.add_parser(name, help=help, description=help)
        _add_design(sub, name == "cut")
        if name in ("packet", "cut", "mounts"):
            sub.add_argument("-o", "--out", metavar="DIR", default="out", help="default: out")
        else:
            sub.add_argument("--json", action="store_true", help="print JSON instead of a table")
        if name == "cut":
            _add_cutting(sub)
        sub.set_defaults(run=run)
    sub = commands.add_parser("section", help="one airfoil section: figures, or a file")
    sub.add_argument("name", metavar="NAME", help="naca2412, clarky, or a coordinate file")
    sub.add_argument("--write", metavar="FILE", help=".dat, .csv, .svg, .png or .dxf")
    sub.add_argument("--chord", metavar="MM", type=float, default=200.0,
                     help="chord of drawings in mm, default 200")
    sub.add_argument("--json", action="store_true", help="print JSON instead of a table")
    sub.set_defaults(run=section)
    sub = commands.add_parser("new", help="a commented starter definition")
    sub.add_argument("file", metavar="FILE")
    sub.set_defaults(run=new)
    sub = commands.add_parser("demo", help="the packet of a shipped design")
    sub.add_argument("design", nargs="?", default=DEMO, metavar="NAME", help=f"default: {DEMO}")
    sub.add_argument("-o", "--out", metavar="DIR", default="out", help="default: out")
    sub.set_defaults(run=packet)
    return top


def _add_design(sub: argparse.ArgumentParser, optional: bool) -> None:
    sub.add_argument("design", metavar="DESIGN", nargs="?" if optional else None,
                     help="a file, or the name of a shipped design")


def _add_cutting(sub: argparse.ArgumentParser) -> None:
    """What only the cut command takes."""
    sub.add_argument("--kits", metavar="N", type=_count, default=1,
                     help="nest N kits together; each part is marked with its kit's number")
    sub.add_argument("--freeze", metavar="SHEET", nargs="+", default=[],
                     help="record that these sheets have been cut, beside the definition")
    sub.add_argument("--paper", action="store_true",
                     help="also the sheets at 1:1 as PDF, for a knife")
    sub.add_argument("--coupon", metavar="MATERIAL",
                     help="a fit coupon of this material instead; DESIGN may be left out")
    sub.add_argument("--thickness", metavar="MM", type=float, default=3.0,
                     help="of the coupon, with calipers; default 3")


def _count(text: str) -> int:
    if not text.isdigit() or not 1 <= int(text) <= 50:
        raise argparse.ArgumentTypeError("a whole number from 1 to 50 is wanted")
    return int(text)


def say(text: str) -> None:
    """Progress, for a person watching."""
    if sys.stderr.isatty():
        print(f"  {text} ...", file=sys.stderr)


def _build(args: argparse.Namespace) -> Build:
    from buildgen.build import build
    from buildgen.design import load

    return build(load(args.design), say)


def _verdict(made: Build) -> int:
    return CHECK_FAILED if made.worst == "fail" else FINE


def packet(args: argparse.Namespace) -> int:
    """Write the whole packet and say what it holds."""
    made = _build(args)
    folder = made.write(args.out)
    from buildgen.terminal import summary

    print(summary(made, folder))
    return _verdict(made)


def cut(args: argparse.Namespace) -> int:
    """Write sheets and stick list; record cut ones; or write a fit coupon."""
    if args.coupon:
        from buildgen.build import write_coupon

        print(write_coupon(args.coupon, args.thickness, args.design, args.out))
        return FINE
    if not args.design:
        raise DesignError(Problem("", "Name the design to cut.", "buildgen cut DESIGN"))
    made = replace(_build(args), kits=args.kits)
    if args.freeze:
        made = made.frozen(args.freeze)
    folder = made.write_cut(args.out, args.paper)
    from buildgen.terminal import cut_table

    print(cut_table(made, folder))
    return FINE


def mounts(args: argparse.Namespace) -> int:
    """Write the printed parts."""
    made = _build(args)
    folder = made.write_mounts(args.out)
    from buildgen.terminal import mounts_table

    print(mounts_table(made, folder))
    return FINE


def balance(args: argparse.Namespace) -> int:
    """Print weights and balance."""
    made = _build(args)
    from buildgen.packet.kit_json import balance_json
    from buildgen.terminal import balance_table

    print(_json(balance_json(made.balance)) if args.json else balance_table(made))
    return _verdict(made)


def check(args: argparse.Namespace) -> int:
    """Print every check, worst first."""
    made = _build(args)
    from buildgen.packet.kit_json import check_json
    from buildgen.terminal import checks_table

    print(_json([check_json(c) for c in made.checks]) if args.json else checks_table(made))
    return _verdict(made)


def section(args: argparse.Namespace) -> int:
    """Print a section's figures, or write it to a file."""
    from buildgen.section import describe, find, table, write

    found = find(args.name, (Path(),))
    if args.write:
        write(found, args.write, args.chord)
    print(_json(describe(found)) if args.json else table(found))
    return FINE


def new(args: argparse.Namespace) -> int:
    """Write a starter definition and the schema that editors check it by."""
    from buildgen.design.starter import write_starter

    print(write_starter(Path(args.file)))
    return FINE


def _json(data: Any) -> str:
    return json.dumps(data, indent=1, ensure_ascii=False)


def run(argv: list[str] | None = None) -> int:
    """Run one command and return its exit status."""
    args = parser().parse_args(argv)
    command: Callable[[argparse.Namespace], int] = args.run
    try:
        return command(args)
    except DesignError as error:
        for problem in error.problems:
            print(_complaint(problem), file=sys.stderr)
        return WRONG_INPUT
    except BrokenPipeError:
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return FINE
    except KeyboardInterrupt:
        print("interrupted; nothing was changed", file=sys.stderr)
        return INTERNAL
    except Exception:
        traceback.print_exc()
        print("buildgen: an internal fault; the lines above belong in a report", file=sys.stderr)
        return INTERNAL


def _complaint(problem: Problem) -> str:
    return str(problem)


def main() -> None:
    """Entry of the console script."""
    sys.exit(run())
