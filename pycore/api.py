"""The one door the page uses: JSON text in, JSON text out. It never raises."""

import hashlib
import json
import re
import traceback

from pycore import DATA_EDITION, __version__, words
from pycore.data import demo_job, number, table
from pycore.errors import Fault, InputErrors
from pycore.job import LARGEST_LENGTH_MM, parse_job
from pycore.plan import plan
from pycore.reading import LARGEST_MM, SMALLEST_MM

DATE = re.compile(r"[0-9]{4}-(0[1-9]|1[0-2])-(0[1-9]|[12][0-9]|3[01])")


def run(request_text):
    """Answer a request {"do": plan | save | open | catalogue, …}; faults and crashes are answers too."""
    try:
        request = _request(request_text)
        answer = {"ok": True, **ACTIONS[request["do"]](request)}
    except InputErrors as errors:
        answer = {"ok": False, "errors": errors.to_json()}
    except Exception as error:  # a bug of ours must reach the page as an answer, not kill the worker
        answer = {"ok": False, "bug": _bug(error)}
    return json.dumps(answer, ensure_ascii=False, allow_nan=False)


def _request(text):
    """The request as a dictionary with a known action."""
    try:
        request = json.loads(text)
    except RecursionError:
        raise InputErrors([Fault("request", "nested too deeply", "JSON text")]) from None
    except ValueError as error:
        raise InputErrors([Fault("request", str(error), "JSON text")]) from None
    action = request.get("do") if isinstance(request, dict) else None
    if not isinstance(action, str) or action not in ACTIONS:
        raise InputErrors([Fault("do", action, "one of " + ", ".join(ACTIONS))])
    return request


def _bug(error):
    last = traceback.extract_tb(error.__traceback__)[-1]
    where = f"{last.filename.rsplit('/', 1)[-1]}:{last.lineno}"
    what = f"{type(error).__name__}: {error}"[:300]
    return {
        "id": hashlib.sha256(f"{where} {what}".encode()).hexdigest()[:8],
        "what": what,
        "where": where,
        "versions": {"quenchwright": __version__, "data": DATA_EDITION},
    }


def _plan(request):
    from pycore.sheet import render_sheet

    made = plan(parse_job(request.get("job"))).to_json(_date(request))
    return {"job": made["job"], "plan": made, "sheet": render_sheet(made)}


def _save(request):
    from pycore.sheet import save_sheet, sheet_filename

    made = plan(parse_job(request.get("job"))).to_json(_date(request))
    return {"filename": sheet_filename(made), "html": save_sheet(made)}


def _open(request):
    from pycore.sheet import open_sheet

    text = request.get("text")
    if not isinstance(text, str):
        raise InputErrors([Fault("file", None, "the text of a saved sheet or of a job")])
    return _plan(dict(request, job=open_sheet(text)))


def _date(request):
    """Today as the browser told it, only if it is a date."""
    date = request.get("date")
    return date if isinstance(date, str) and DATE.fullmatch(date) else None


def _named(ids):
    return [{"id": id_, "name": name} for id_, name in ids.items()]


def _catalogue(request):
    """All the form offers, so that it works before Python is up."""
    split = lambda row: [alias for alias in (row["aliases"] or "").split("|") if alias]  # noqa: E731
    return {
        "catalogue": {
            "version": __version__,
            "data_edition": DATA_EDITION,
            "grades": [
                {"id": r["id"], "name": r["name"], "aliases": split(r), "family": r["family"]} for r in table("grades")
            ],
            "uses": [
                {
                    "id": r["id"],
                    "name": r["name"],
                    "hardness_HRC": [number(r["HRC_low"]), number(r["HRC_high"])],
                    "zone": r["zone"],
                }
                for r in table("uses")
            ],
            "media": [
                {
                    "id": r["id"],
                    "name": r["name"],
                    "kind": r["kind"],
                    "default_C": words.default_bath_C(r),
                    "liquid": words.is_liquid(r),
                }
                for r in table("media")
            ],
            "shapes": [
                {
                    "id": id_,
                    "name": name,
                    "dimensions": [
                        {"id": d, "name": words.DIMENSION_NAMES[d], "required": d in needed} for d in needed + optional
                    ],
                }
                for id_, (name, needed, optional) in words.SHAPES.items()
            ],
            "features": _named(words.FEATURES),
            "zones": _named(words.ZONES),
            "conditions": _named(words.CONDITIONS),
            "heats": _named(words.HEATS),
            "atmospheres": _named(words.ATMOSPHERES),
            "tempers": _named(words.TEMPERS),
            "colds": _named(words.COLDS),
            "agitations": _named(words.AGITATIONS),
            "units": _named(words.UNITS),
            "elements": list(words.ELEMENTS),
            "demo_job": demo_job(),
            "limits": {
                "length_mm": [SMALLEST_MM, LARGEST_LENGTH_MM],
                "section_mm": [SMALLEST_MM, LARGEST_MM],
                "elements_pct": words.ELEMENTS,
            },
        }
    }


ACTIONS = {"plan": _plan, "save": _save, "open": _open, "catalogue": _catalogue}
