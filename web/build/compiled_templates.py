"""Prints the sheet's templates compiled to Python, as JSON {file name: source}. Run by the build in .venv."""

import json
import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

from pycore.sheet.templates import compiled_modules

json.dump(compiled_modules(), sys.stdout)
