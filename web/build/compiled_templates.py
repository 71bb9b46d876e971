"""Prints the sheet's templates compiled to Python, as JSON {file name: source}. Run by the build in .venv."""

import json
import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

from pycore.sheet import templates

# defer_init: the module must not ask for the environment before the template is made from it.
json.dump({templates.module_name(name) + ".py":
           templates.environment().compile(templates.read(name), name, name, raw=True, defer_init=True)
           for name in templates.NAMES}, sys.stdout)
