"""Prints, as JSON, what the page shows before Python is awake. Run by the build in .venv.

{"catalogue": …, "demo_sheet": "<article …", "sheet_css": "…", "versions": {…}}
"""

import json
import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

import pycore
from pycore import api, sheet


def ask(request: dict) -> dict:
    """One request to the core, which must succeed here."""
    answer = json.loads(api.run(json.dumps(request)))
    if not answer["ok"]:
        sys.exit(f"the core refused {request['do']}: {json.dumps(answer)}")
    return answer


def main() -> None:
    """Print the page's data."""
    catalogue = ask({"do": "catalogue"})["catalogue"]
    demo = ask({"do": "plan", "job": catalogue["demo_job"]})
    json.dump({"catalogue": catalogue, "demo_sheet": demo["sheet"], "sheet_css": sheet.sheet_css(),
               "versions": {"quenchwright": pycore.__version__, "data": pycore.DATA_EDITION}},
              sys.stdout, ensure_ascii=False, sort_keys=True)


main()
