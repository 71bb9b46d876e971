"""Command line: python -m pycore JOB.json … [-o OUT] [--format html|json|text]."""

import argparse
import datetime
import json
import pathlib
import sys

from pycore import __version__
from pycore.errors import Fault, InputErrors
from pycore.plan import plan

FAULTY = 2
FORMATS = ("text", "json", "html")


def main(arguments=None):
    options = _options(arguments)
    date = options.date or datetime.date.today().isoformat()
    jobs = list(_read_jobs(options.jobs))
    single = len(jobs) == 1 and not jobs[0][0]
    format_ = options.format or _format_of(options.output) or ("text" if single else "json")
    if not single and format_ != "json":
        return _fail("several jobs are written as JSON Lines: use --format json", FAULTY)
    by_line = not single or (
        options.format == "json" and options.jobs == ["-"]
    )  # one line a job, whatever becomes of it
    lines, status = [], 0
    for _, where, job, fault in jobs:
        errors = [fault] if fault is not None else []
        if not errors:
            try:
                lines.append(_write(plan(job).to_json(date), format_, by_line))
                continue
            except InputErrors as found:
                errors = found.faults
            except Exception as bug:  # one job must not stop the others; alone it may show its traceback
                if single:
                    raise
                errors = [Fault("job", f"{type(bug).__name__}: {bug}", "a report to the developers: this is a bug")]
        status = FAULTY
        for error in errors:
            print(f"{where}: {error.message}", file=sys.stderr)
        if by_line:
            lines.append(_compact({"errors": InputErrors(errors).to_json()}))
    text = "\n".join(lines)
    if text:
        _put(text if text.endswith("\n") else text + "\n", options.output)
    return status


def _options(arguments):
    parser = argparse.ArgumentParser(prog="python -m pycore", description="Plan hardening and tempering from a job.")
    parser.add_argument(
        "jobs",
        nargs="+",
        metavar="JOB",
        help="a job as JSON, a saved sheet, a JSON Lines file of jobs, or - for standard input",
    )
    parser.add_argument("-o", "--output", help="file to write (standard output otherwise)")
    parser.add_argument(
        "--format", choices=FORMATS, help="html: the sheet as a file; json: the plan; text: the sheet for a terminal"
    )
    parser.add_argument("--date", help="date on the sheet, YYYY-MM-DD (today otherwise)")
    parser.add_argument("--version", action="version", version=f"quenchwright {__version__}")
    return parser.parse_args(arguments)


def _format_of(output):
    ending = (output or "").rsplit(".", 1)[-1].lower()
    return {"html": "html", "htm": "html", "json": "json", "jsonl": "json", "txt": "text"}.get(ending)


def _read_jobs(names):
    """(one of several, where, job or None, fault or None) for every job in the files named."""
    for name in names:
        try:
            text = sys.stdin.read() if name == "-" else pathlib.Path(name).read_text(encoding="utf-8")
        except (OSError, UnicodeDecodeError) as error:
            yield len(names) > 1, name, None, Fault("file", str(error), "a readable UTF-8 file")
            continue
        yield from _jobs_in(text, name, len(names) > 1)


def _jobs_in(text, name, many):
    """One JSON document, a saved sheet, or a job on every line."""
    many = many or _is_lines(name)
    if "<script" in text[:5_000_000] and text.lstrip().startswith("<"):
        from pycore.sheet import open_sheet

        try:
            yield many, name, open_sheet(text), None
        except InputErrors as errors:
            yield many, name, None, errors.faults[0]
        return
    try:
        document = _load(text)
    except ValueError:
        document = None
    if document is not None:
        documents = document if isinstance(document, list) else [document]
        for i, job in enumerate(documents):
            yield many or len(documents) > 1, name if len(documents) == 1 else f"{name}[{i}]", job, None
        return
    lines = [(n, line) for n, line in enumerate(text.splitlines(), 1) if line.strip()]
    if len(lines) < 2 and not _is_lines(name):
        yield many, name, None, _not_json(text)
        return
    for n, line in lines:
        try:
            yield True, f"{name}:{n}", _load(line), None
        except ValueError:
            yield True, f"{name}:{n}", None, _not_json(line)


def _is_lines(name):
    return name.lower().endswith((".jsonl", ".ndjson"))


def _load(text):
    """JSON with NaN and Infinity left in: the job's own checks name the field they stand in."""
    try:
        return json.loads(text)
    except RecursionError:
        raise ValueError("nested too deeply") from None


def _not_json(text):
    try:
        json.loads(text)
    except RecursionError:
        return Fault("job", "nested too deeply", "a job as a JSON object")
    except ValueError as error:
        return Fault("job", str(error), "a job as a JSON object")
    return Fault("job", text[:60], "a job as a JSON object")


def _write(made, format_, by_line):
    if format_ == "json":
        return _compact(made) if by_line else json.dumps(made, ensure_ascii=False, allow_nan=False, indent=1)
    from pycore.sheet import save_sheet, sheet_text

    return save_sheet(made) if format_ == "html" else sheet_text(made)


def _compact(value):
    return json.dumps(value, ensure_ascii=False, allow_nan=False)


def _put(text, output):
    if output is None:
        sys.stdout.write(text)
        return
    with open(output, "w", encoding="utf-8", newline="\n") as file:
        file.write(text)


def _fail(message, status):
    print(message, file=sys.stderr)
    return status


if __name__ == "__main__":
    sys.exit(main())
