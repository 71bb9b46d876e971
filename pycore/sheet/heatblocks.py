"""The text of the heat line's stations, measured before it is set: label, number, unit, small rows."""
from markupsafe import Markup

from . import svg
from .metrics import CAP_HEIGHT, POINT_MM, shorten, width_mm, wrap
from .words import NOT_COMPUTED

STACKED_PT = 26                  # a number of this size has room for two small lines beside it
SMALL_PT = 9.5                    # labels and notes
ROW_MM = 4.1                      # from one small row to the next
# Most that a label or note may take before it is broken or cut, by how crowded the line is.
ROOM_MM = {"wide": 46, "middle": 46, "narrow": 40, "close": 33, "tight": 31}
SMALL_ROOM_MM = 25                # the same for a small number on a crowded line
ON_LINE, OVER_NUMBER, LABEL_CAP = 1.9, 1.7, 2.6
CROWDED = ("close", "tight")


class Block:
    """The text of one station, measured: label, number, unit and second line beside it, small rows under it."""

    def __init__(self, station, size_pt, mode, beside=(), aside=False):
        """`beside`: which of "other", "note" stands beside the number, under the unit; `aside`: the label too."""
        self.station = station
        self.key = station["key"]
        if size_pt < STACKED_PT:
            beside, aside = (), False          # too low for two lines beside it
        worded = not any(char.isdigit() for char in station["value"])
        self.size_pt = size_pt * 0.55 if worded else size_pt
        self.unit_pt = max(9, size_pt * 0.36)
        mark = "~" if station["outside"] and station["value"] != NOT_COMPUTED else ""
        self.value = shorten(mark + station["value"], self.size_pt, 62, bold=True)
        self.number_mm = width_mm(self.value, self.size_pt, bold=True)
        self.cap_mm = size_pt * POINT_MM * CAP_HEIGHT
        self.step = f"{station['order']} " if station["order"] else ""
        step_mm = width_mm(self.step, SMALL_PT, bold=True)
        room = min(ROOM_MM[mode], SMALL_ROOM_MM) if mode in CROWDED and size_pt < STACKED_PT else ROOM_MM[mode]
        self.label = shorten(station["label"], SMALL_PT, room - step_mm)
        label_mm = step_mm + width_mm(self.label, SMALL_PT)
        self.aside = aside
        self.second = " · ".join(station[name] for name in beside if station[name])
        self.second = shorten(self.second, SMALL_PT, 26)
        unit_mm = width_mm(station["unit"], self.unit_pt, bold=True)
        self.gap_mm = 0.7 + size_pt * 0.02 if station["unit"] or self.second else 0
        if aside:
            self.unit_mm = unit_mm + 2
            core = self.number_mm + self.gap_mm + self.unit_mm + max(label_mm, width_mm(self.second, SMALL_PT))
        else:
            core = max(self.number_mm + self.gap_mm + max(unit_mm, width_mm(self.second, SMALL_PT)), label_mm)
        self.rows = rows_within([station[name] for name in ("other", "note") if station[name] and name not in beside],
                                core if mode in CROWDED else max(core, 33), ROOM_MM[mode])
        self.width_mm = max([core] + [width_mm(row, SMALL_PT) for row in self.rows])

    @property
    def height_mm(self):
        """From the line to the far edge of the block, without its small rows."""
        return ON_LINE + self.cap_mm + (0 if self.aside else OVER_NUMBER + LABEL_CAP)

    def draw(self, x, number_y):
        """The block with its number on the baseline `number_y`."""
        top = number_y - self.cap_mm
        parts = [svg.text(x, number_y, self.value, self.size_pt, "number", bold=True)]
        side = x + self.number_mm + self.gap_mm
        unit = self.station["unit"]
        label_x, label_y = x, top - OVER_NUMBER
        if self.aside:
            parts.append(svg.text(side, number_y, unit, self.unit_pt, "unit", bold=True))
            label_x = side = side + self.unit_mm
            label_y = number_y - ROW_MM if self.second else number_y
        elif unit and self.second:
            parts.append(svg.text(side, top + self.unit_pt * POINT_MM * CAP_HEIGHT, unit, self.unit_pt, "unit", bold=True))
        elif unit:
            parts.append(svg.text(side, number_y, unit, self.unit_pt, "unit", bold=True))
        if self.second:
            parts.append(svg.text(side, number_y, self.second, SMALL_PT, "second"))
        if self.step or self.label:
            parts.append(svg.element(
                "text", svg.element("tspan", Markup.escape(self.step), font_weight="700"), Markup.escape(self.label),
                x=label_x, y=label_y, font_size=svg.mm(SMALL_PT * POINT_MM), class_="label"))
        return svg.link(self.key, *parts)


def rows_within(parts, joined_mm, room_mm):
    """Short texts set side by side where `joined_mm` allows, else one under the other; long ones broken."""
    rows = []
    for part in parts:
        joined = f"{rows[-1]} · {part}" if rows else part
        if rows and width_mm(joined, SMALL_PT) <= joined_mm:
            rows[-1] = joined
        else:
            rows += [shorten(row, SMALL_PT, room_mm) for row in wrap(part, SMALL_PT, room_mm)[:2]]
    return rows[:3]


def block_of(station, kind, size_pt, mode):
    """The station's block in this mode. Where it is crowded, what the steps also say is left out."""
    if kind in ("soak", "transfer", "hold"):
        if mode in CROWDED:
            station = station if kind == "soak" else {**station, "note": ""}
            return Block(station, size_pt, mode, aside=kind == "transfer" or (kind == "hold" and mode == "close"))
        beside = ("note",) if mode != "narrow" or kind != "soak" else ()
        return Block(station, size_pt, mode, beside, aside=kind != "soak")
    if mode in CROWDED and kind in ("austenitize", "temper"):
        # "heat to 1455 °F" over "790 °C": the other scale moves into the label
        label = f"{station['label']} {station['other']}".strip()
        note = "" if kind == "temper" else station["note"]
        return Block({**station, "label": label, "other": "", "note": note}, size_pt, mode)
    return Block(station, size_pt, mode, ("other",) if mode == "wide" else ())
