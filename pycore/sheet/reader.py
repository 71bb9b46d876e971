"""Reading a plan: values by their path, with the note and the mark that belong to each."""
import re

from markupsafe import Markup, escape

from .words import NOT_COMPUTED, WHOLE, both_units, clean, is_number, number


def anchor(key):
    """A note's address: only letters, digits, dot, hyphen and underscore."""
    return "why-" + re.sub(r"[^A-Za-z0-9_.-]", "-", key)


def rows_of(value):
    """A list of the plan's dictionaries; anything else in it is left out."""
    return [row for row in value if isinstance(row, dict)] if isinstance(value, list) else []


def texts_of(value):
    return [text for text in map(clean, value) if text] if isinstance(value, list) else []


def part_of(plan, name):
    value = plan.get(name)
    return value if isinstance(value, dict) else {}


class Reader:
    """Looks values up by their path and knows which have a note and which a mark."""

    def __init__(self, plan):
        self.plan = plan
        self.why = part_of(plan, "why")
        self.marks = [(clean(mark.get("value")), clean(mark.get("text"))) for mark in rows_of(plan.get("marks"))]
        self.marked = False

    def value(self, path):
        here = self.plan
        for name in path.split("."):
            here = here.get(name) if isinstance(here, dict) else None
        return here

    def reason(self, path):
        """What the mark on this value says, or ''."""
        for value, text in self.marks:
            if value and (path == value or path.startswith(value + ".")):
                return text
        return ""

    def outside(self, path):
        note = self.why.get(path)
        return bool(self.reason(path)) or (isinstance(note, dict) and note.get("inside") is False)

    def link_to(self, path):
        """(address of the note or None, whether the value is marked) for a path of the plan."""
        if not isinstance(path, str) or not path:
            return None, False
        outside = self.outside(path)
        self.marked = self.marked or outside
        return ("#" + anchor(path) if isinstance(self.why.get(path), dict) else None), outside

    def shown(self, path, text, together=False):
        """`text` for the value at `path`: linked to its note, marked "~" when outside its range.
        With `together` its short parts, set apart by " · ", are not broken over two lines."""
        if not text:
            return Markup("")
        address, outside = self.link_to(path)
        text = ("~" if outside and not text.startswith(("~", NOT_COMPUTED)) else "") + text
        if together:
            *before, last = text.split(" · ")
            parts = [part + " ·" for part in before] + [last]      # the dot stays with what it follows
            words = Markup(" ").join(Markup('<span class="whole">{}</span>').format(part) if len(part) <= WHOLE else escape(part)
                                     for part in parts)
        else:
            words = escape(text)
        return Markup('<a class="why" href="{}">{}</a>').format(address, words) if address else words

    def number(self, path, unit=""):
        value = self.value(path)
        if not is_number(value):
            return self.shown(path, NOT_COMPUTED)
        return self.shown(path, f"{number(value)} {unit}".strip())

    def temperature(self, path):
        value = self.value(path)
        return self.shown(path, both_units(value)) if is_number(value) else self.number(path)

    def length(self, path):
        value = self.value(path)
        if is_number(value) and self.plan.get("units") == "in":
            return self.shown(path, f"{number(round(value / 25.4, 3) or value / 25.4, 2)} in")
        return self.number(path, "mm")
