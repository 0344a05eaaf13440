"""The same door from a terminal.

    python -m beadwright evaluate FILE          prints the answer as JSON
    python -m beadwright evaluate FILE --text   prints the sheet for reading
    python -m beadwright export KIND FILE -o OUT
    python -m beadwright forms                  prints every input as JSON
"""

from __future__ import annotations

import argparse
import sys
from pathlib import Path

from . import desk
from .job import open_bytes
from .working import Issue

EXIT_OK, EXIT_REFUSED, EXIT_USAGE = 0, 1, 2


def _read(name: str) -> bytes:
    return sys.stdin.buffer.read() if name == "-" else Path(name).read_bytes()


def _parser() -> argparse.ArgumentParser:
    parser = argparse.ArgumentParser(prog="beadwright", description="Size and check sealant joints from a job file.")
    commands = parser.add_subparsers(dest="command", required=True)
    run = commands.add_parser("evaluate", help="judge every joint of a job file")
    run.add_argument("file", help="a .beadwright.json file, or - for standard input")
    run.add_argument("--text", action="store_true", help="print the sheet for reading instead of JSON")
    write = commands.add_parser("export", help="write a job out in another form")
    write.add_argument("kind", choices=desk.EXPORT_KINDS)
    write.add_argument("file", help="a .beadwright.json file, or - for standard input")
    write.add_argument("-o", "--out", required=True, help="file to write, or - for standard output")
    commands.add_parser("forms", help="print every input as JSON")
    return parser


def _write(name: str, data: bytes) -> None:
    if name == "-":
        sys.stdout.buffer.write(data)
        sys.stdout.buffer.flush()
    else:
        Path(name).write_bytes(data)


def main(arguments: list[str] | None = None) -> int:
    """Run one command; returns the exit status (0 done, 1 the file was refused, 2 wrong use)."""
    options = _parser().parse_args(arguments)
    if options.command == "forms":
        _write("-", (desk.to_json(desk.forms()) + "\n").encode("utf-8"))
        return EXIT_OK
    try:
        opened = open_bytes(_read(options.file))
    except OSError as error:
        print(f"beadwright: cannot read {options.file}: {error.strerror or error}", file=sys.stderr)
        return EXIT_USAGE
    if opened.job is None:
        return _refuse(opened.issues, as_json=options.command == "evaluate" and not options.text)
    if options.command == "export":
        _, _, data = desk.export(opened.job, options.kind)
    elif options.text:
        data = desk.export(opened.job, "text")[2]
    else:
        answer = desk.evaluate(opened.job)
        answer["issues"] = [issue.as_dict() for issue in opened.issues if issue.path == "/version"] + answer["issues"]
        data = (desk.to_json(answer) + "\n").encode("utf-8")
    _write(getattr(options, "out", "-"), data)
    return EXIT_OK


def _refuse(issues: list[Issue], *, as_json: bool) -> int:
    if as_json:
        _write("-", (desk.to_json(desk.refused(issues)) + "\n").encode("utf-8"))
    for issue in issues:
        print(f"beadwright: {issue.message}", file=sys.stderr)
    return EXIT_REFUSED


if __name__ == "__main__":
    sys.exit(main())
