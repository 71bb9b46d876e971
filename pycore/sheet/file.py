"""A sheet as a file: saved so that it reads and prints alone, and opened again as from a stranger."""
import base64
import functools
import json
import math
import pathlib
import re
import unicodedata

from ..errors import Fault, InputErrors

FOLDER = pathlib.Path(__file__).parent
SCHEMA, JOB_SCHEMA = "quenchwright.sheet/1", "quenchwright.job/1"
BLOCK_ID = "quenchwright-sheet"
LONGEST = 5_000_000       # characters of a file that is looked at
DEEPEST = 12              # nested lists and objects in a job: it needs six
ACCEPTED = "a sheet saved by Quenchwright, or a job as JSON"
FONTS = (("Regular", 400), ("Bold", 700))


@functools.lru_cache(maxsize=2)
def sheet_css(embed_fonts=True):
    """The sheet's style; with `embed_fonts` the two font files are inside it, so it needs no other file."""
    css = (FOLDER / "sheet.css").read_text(encoding="utf-8")
    if not embed_fonts:
        return css
    faces = []
    for name, weight in FONTS:
        data = base64.b64encode((FOLDER / "fonts" / f"AtkinsonHyperlegibleNext-{name}.woff2").read_bytes()).decode("ascii")
        faces.append(f'@font-face {{ font-family: "Atkinson Hyperlegible Next"; font-weight: {weight}; '
                     f"src: url(data:font/woff2;base64,{data}) format(\"woff2\") }}\n")
    return "".join(faces) + css


SAVED_PAGE_CSS = """
body.saved-sheet { margin: 0; padding: 6mm 4mm; background: var(--sheet-paper, #fff) }
@media screen and (prefers-color-scheme: dark) {
  :root { color-scheme: dark; --sheet-ink: #ece8e1; --sheet-paper: #16130f; --sheet-accent: #ffb07a }
}
@media print { body.saved-sheet { padding: 0; background: none } }
"""


def save_sheet(plan):
    """The whole file: the rendered sheet, its style and fonts, and the job to compute it again from."""
    from markupsafe import Markup

    from . import render_sheet
    from .templates import template

    block = {"schema": SCHEMA, "version": plan.get("version"), "data_edition": plan.get("data_edition"), "job": plan.get("job")}
    text = json.dumps(block, ensure_ascii=False, allow_nan=False, separators=(",", ":"))
    for char in "<>&\u2028\u2029":
        text = text.replace(char, f"\\u{ord(char):04x}")
    title = plan.get("title") if isinstance(plan.get("title"), str) else "Process sheet"
    return template("saved.html.j2").render(
        title=title, version=plan.get("version") or "", css=Markup(sheet_css(True) + SAVED_PAGE_CSS),
        sheet=Markup(render_sheet(plan)), block=Markup(text)).strip() + "\n"


def sheet_filename(plan):
    """"cold-chisel-2026-12-01.html": small letters, digits and hyphens, whatever the title holds."""
    title = plan.get("title") if isinstance(plan.get("title"), str) else ""
    ascii_title = unicodedata.normalize("NFKD", title).encode("ascii", "ignore").decode("ascii").lower()
    slug = re.sub(r"[^a-z0-9]+", "-", ascii_title)[:60].strip("-") or "sheet"
    date = plan.get("date") if isinstance(plan.get("date"), str) else ""
    ending = date if re.fullmatch(r"\d{4}-\d\d-\d\d", date, re.ASCII) else ""
    if not ending:
        ending = re.sub(r"[^a-z0-9]", "", str(plan.get("id") or "").lower())[:16] or "sheet"
    return f"{slug}-{ending}.html"


def open_sheet(text):
    """The job inside a saved sheet, or a bare job. The file is a stranger's: only its one data block is read,
    and everything unexpected is refused with InputErrors. The job itself is checked later, by parse_job."""
    if not isinstance(text, str):
        refuse(type(text).__name__, "a file of text: " + ACCEPTED)
    if len(text) > LONGEST:
        refuse(f"{len(text)} characters", f"a file of at most {LONGEST // 1_000_000} million characters")
    text = text.lstrip("\ufeff \t\r\n")
    if text.startswith("{"):
        return job_of(strict_json(text))
    blocks = [body for attributes, body in SCRIPT.findall(text) if is_ours(attributes)]
    if len(blocks) != 1:
        refuse(f"a file with {len(blocks)} sheet blocks" if blocks else start_of(text), ACCEPTED)
    return job_of(strict_json(blocks[0]), inside_sheet=True)


SCRIPT = re.compile(r"<script\b([^<>]*)>([^<]*)</script\s*>", re.IGNORECASE)   # our block never holds a "<"


def is_ours(attributes):
    found = dict(re.findall(r'([a-z-]+)\s*=\s*"([^"]*)"', attributes.lower()))
    return found.get("id") == BLOCK_ID and found.get("type") == "application/json"


def job_of(data, inside_sheet=False):
    """The job dictionary from the parsed data, by its schema."""
    if not isinstance(data, dict):
        refuse(type(data).__name__, ACCEPTED)
    schema = data.get("schema")
    written_by_hand = schema is None and data.keys() >= {"steel", "part", "aim", "shop"}
    if not inside_sheet and (schema == JOB_SCHEMA or written_by_hand):
        return data
    if schema != SCHEMA:
        refuse(schema if isinstance(schema, str) else "no schema", f'a file with the schema "{SCHEMA}" or "{JOB_SCHEMA}"')
    version = data.get("version")
    if not isinstance(version, str) or not re.fullmatch(r"\d{1,4}(\.\d{1,4}){1,2}[a-z0-9.+-]{0,20}", version, re.ASCII):
        refuse(version if isinstance(version, str) else "no version", "a sheet that says which version wrote it")
    job = data.get("job")
    if not isinstance(job, dict):
        refuse("no job", "a sheet with its job inside")
    if job.get("schema") != JOB_SCHEMA:
        refuse(job.get("schema") if isinstance(job.get("schema"), str) else "no schema", f'a job with the schema "{JOB_SCHEMA}"')
    return job


def strict_json(text):
    """JSON as the standard has it: no NaN, no endless numbers, no name twice, not too deep."""
    check_depth(text)
    try:
        return json.loads(text, parse_constant=no_constant, parse_float=finite, parse_int=short_int,
                          object_pairs_hook=no_name_twice)
    except InputErrors:
        raise
    except (ValueError, RecursionError):
        refuse(start_of(text), "complete, correct JSON; the file may have been cut short or changed")


STRUCTURE = re.compile(r'"(?:[^"\\]|\\.)*"|[\[\]{}]', re.DOTALL)


def check_depth(text):
    """Refuse deep nesting before the parser meets it."""
    depth = 0
    for match in STRUCTURE.finditer(text):
        char = match.group()
        if char in "[{":
            depth += 1
            if depth > DEEPEST:
                refuse(f"more than {DEEPEST} levels of brackets", "a job, which is never that deep")
        elif char in "]}":
            depth -= 1


def no_constant(name):
    refuse(name, "numbers only; NaN and Infinity are not numbers")


def finite(text):
    value = float(text)
    if not math.isfinite(value):
        refuse(text, "a number of ordinary size")
    return value


def short_int(text):
    if len(text) > 20:
        refuse(text, "a number of ordinary size")
    return int(text)


def no_name_twice(pairs):
    found = dict(pairs)
    if len(found) != len(pairs):
        refuse("a name that stands twice", "each name once")
    return found


def start_of(text):
    """The first words of a file, for the message."""
    return " ".join(text[:200].split())[:40] or "an empty file"


def refuse(value, expected):
    value = " ".join(str(value).split())
    raise InputErrors([Fault("file", value if len(value) <= 60 else value[:59] + "…", expected)])
