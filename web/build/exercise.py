"""Uses every way into the core once. Runs inside Pyodide (and natively, to compare).

What is imported afterwards is what the page needs of the standard library and
of numpy; the build keeps that, and a test repeats the run on what was kept.
"""

import json
import sys


def exercise() -> str:
    """Run plans, saving, opening, the catalogue and faults; return JSON: modules, files, answers."""
    from pycore import api

    def ask(request):
        return json.loads(api.run(request if isinstance(request, str) else json.dumps(request)))

    catalogue = ask({"do": "catalogue"})["catalogue"]
    demo = catalogue["demo_job"]
    answers = {"demo": ask({"do": "plan", "job": demo, "date": "2026-01-31"})}
    saved = ask({"do": "save", "job": demo, "date": "2026-01-31"})
    answers["save"] = saved
    answers["open"] = ask({"do": "open", "text": saved.get("html", "")})
    for name, job in variants(demo, catalogue):
        answers[name] = ask({"do": "plan", "job": job})
    answers["no job"] = ask({"do": "plan", "job": {}})
    answers["bad file"] = ask({"do": "open", "text": "<p>not a sheet"})
    answers["no json"] = ask("{")
    answers["no such request"] = ask({"do": "dance"})
    answers["a bug"] = provoke_bug(api, ask)
    files = {name: origin(module) for name, module in sys.modules.items()}
    return json.dumps({"modules": sorted(name for name, path in files.items() if path),
                       "files": sorted(set(filter(None, files.values()))),
                       "answers": answers})


def variants(demo: dict, catalogue: dict):
    """A job for every grade, use, shape and bath of the catalogue, each a small change of the demo's."""
    def changed(**parts):
        return {**json.loads(json.dumps(demo)), **parts}

    for grade in catalogue["grades"]:
        yield f"grade {grade['id']}", changed(steel={"grade": grade["id"]})
    for use in catalogue["uses"]:
        yield f"use {use['id']}", changed(aim={"use": use["id"]})
    for medium in catalogue["media"]:
        bath = {"medium": medium["id"], "volume_L": 20, "agitation": "moderate"}
        yield f"bath {medium['id']}", changed(shop={**demo["shop"], "baths": [bath]})
    size = {"diameter": 20, "width": 25, "thickness": 6, "length": 150, "bore": 8, "edge": 1, "spine": 5}
    for shape in catalogue["shapes"]:
        part = {"shape": shape["id"], "dimensions": {d["id"]: size[d["id"]] for d in shape["dimensions"]},
                "zone": "all", "condition": "forged"}
        yield f"shape {shape['id']}", changed(part=part)
    yield "chemistry", changed(steel={"chemistry": {"C": 0.4, "Mn": 0.8, "Cr": 1.0, "Mo": 0.2}, "grain_size": 7})


def provoke_bug(api, ask):
    """Break the core for one call, to see the crash answer and to import what it needs."""
    real = api.plan
    api.plan = lambda *_, **__: 1 / 0
    try:
        return ask({"do": "plan", "job": ask({"do": "catalogue"})["catalogue"]["demo_job"]})
    finally:
        api.plan = real


def origin(module) -> str | None:
    """The file a module came from; None for built-in ones."""
    path = getattr(getattr(module, "__spec__", None), "origin", None)
    return path if path and path not in ("built-in", "frozen") else None
