"""The heat line: temperature against the stations of the work, the numbers standing where they belong.

One rule places everything: a temperature stands on its stretch of the line, a time hangs under it. The
width of every block of text is measured first (metrics.py), then the stretches are cut to fit, so that
nothing can overlap; the numbers are as large as the paper then allows. Not to scale in time.
"""
from markupsafe import Markup

from . import svg
from .metrics import CAP_HEIGHT, POINT_MM, shorten, width_mm
from .words import clean, is_number, both_units

WIDTH_MM = 186
LARGEST_PT, WALL_PT = 46, 32      # critical numbers: at least 32 pt, read from two metres
LABEL_PT, NOTE_PT = 9.5, 9.5
LABEL_ROOM_MM = 33                # a label longer than this is cut short; the step below has it in full
STANDING = ("austenitize", "quench", "temper", "cold")


class Block:
    """The text of one station, measured: label above, number, and beside it unit over second line."""

    def __init__(self, station, size_pt, beside, note_beside=False):
        self.station = station
        self.key = station["key"]
        value = station["value"]
        worded = not any(char.isdigit() for char in value)
        self.size_pt = size_pt * 0.55 if worded else size_pt
        self.unit_pt = max(8.5, size_pt * 0.36)
        self.second_pt = max(8.5, size_pt * 0.29)
        self.second = (station["note"] if note_beside else station["other"]) if beside else ""
        self.second = shorten(self.second, self.second_pt, 24)
        under = [] if note_beside and beside else [station["note"]]
        if not beside and not note_beside:
            under.insert(0, station["other"])
        self.under = " · ".join(part for part in under if part)
        self.value = ("~" if station["outside"] else "") + value
        self.value = shorten(self.value, self.size_pt, 60, bold=True)
        self.number_mm = width_mm(self.value, self.size_pt, bold=True)
        self.gap_mm = size_pt * 0.035 if station["unit"] or self.second else 0
        self.stack_mm = max(width_mm(station["unit"], self.unit_pt, bold=True),
                            width_mm(self.second, self.second_pt))
        self.cap_mm = size_pt * POINT_MM * CAP_HEIGHT
        self.step = f"{station['order']} " if station["order"] is not None else ""
        step_mm = width_mm(self.step, LABEL_PT, bold=True)
        self.label = shorten(station["label"], LABEL_PT, LABEL_ROOM_MM - step_mm)
        self.under = shorten(self.under, NOTE_PT, LABEL_ROOM_MM)
        self.width_mm = max(self.number_mm + self.gap_mm + self.stack_mm,
                            step_mm + width_mm(self.label, LABEL_PT), width_mm(self.under, NOTE_PT))

    @property
    def height_mm(self):
        """From the line to the far edge of the text, without the row under the line."""
        return 1.9 + self.cap_mm + 1.7 + 2.7

    def draw(self, x, label_y, number_y):
        """The block with the given baselines of its label and its number."""
        parts = []
        if self.step or self.label:
            parts.append(svg.element(
                "text", svg.element("tspan", Markup.escape(self.step), font_weight="700"), Markup.escape(self.label),
                x=x, y=label_y, font_size=svg.mm(LABEL_PT * POINT_MM), class_="label"))
        parts.append(svg.text(x, number_y, self.value, self.size_pt, "number", bold=True))
        side = x + self.number_mm + self.gap_mm
        unit = self.station["unit"]
        if unit and self.second:
            top = number_y - self.size_pt * POINT_MM * CAP_HEIGHT
            parts.append(svg.text(side, top + self.unit_pt * POINT_MM * CAP_HEIGHT, unit, self.unit_pt, "unit", bold=True))
        elif unit:
            parts.append(svg.text(side, number_y, unit, self.unit_pt, "unit", bold=True))
        if self.second:
            parts.append(svg.text(side, number_y, self.second, self.second_pt, "second"))
        return svg.link(self.key, *parts)

    def stand(self, x, line_y):
        number_y = line_y - 1.9
        return self.draw(x, number_y - self.cap_mm - 1.7, number_y)

    def hang(self, x, line_y, rows=0):
        """Under the line, below `rows` rows of small text already there."""
        label_y = line_y + 4.3 + 4.3 * rows
        return self.draw(x, label_y, label_y + 1.7 + self.cap_mm)


class Column:
    """One stretch of the line: its temperature, the block on it and what hangs under it."""

    def __init__(self, kind, temperature_C):
        self.kind, self.temperature_C = kind, temperature_C
        self.standing = self.hanging = self.above = None    # above: the transfer, high in the valley
        self.rows = []                                      # small lines of text under the line
        self.again = 0                                      # further tempers at the same heat

    @property
    def width_mm(self):
        widths = [block.width_mm for block in (self.standing, self.hanging, self.above) if block]
        return max(widths + [width_mm(row, NOTE_PT) + (4 if mark else 0) for row, mark in self.rows] + [6])

    def all_rows(self):
        under = self.standing.under if self.standing else ""
        return ([(under, False)] if under else []) + self.rows


def stations_of(plan, link_to):
    """The plan's stations as plain text, faults of type mended, each with its note to link to."""
    found = []
    for raw in plan.get("stations") or []:
        why = raw.get("why")
        key, outside = link_to(why)
        value = clean(raw.get("value"))
        found.append({"id": clean(raw.get("id")), "label": clean(raw.get("label")), "value": value or "not computed",
                      "unit": clean(raw.get("unit")) if value else "", "other": clean(raw.get("other")),
                      "note": clean(raw.get("note")), "order": raw.get("order"), "key": key, "outside": outside,
                      "temperature_C": raw.get("temperature_C") if is_number(raw.get("temperature_C")) else None})
    return found


def cycles_of(plan):
    cycles = (plan.get("temper") or {}).get("cycles")
    return max(1, min(4, int(cycles))) if is_number(cycles) else 1


def columns_of(plan, stations, big_pt, small_pt, beside):
    """The stations gathered into stretches of line, at the given sizes of type."""
    critical = set(plan.get("critical") or [])
    columns, hot, temper = [], None, None
    several_tempers = sum(s["id"].rstrip("0123456789") == "temper" for s in stations) > 1
    for station in stations:
        kind = station["id"].rstrip("0123456789")
        size_pt = big_pt if station["id"] in critical else small_pt
        temperature = station["temperature_C"]
        timed = kind in ("soak", "transfer", "hold")
        block = Block(station, size_pt, beside or timed, note_beside=timed)
        last = columns[-1] if columns else None
        if kind == "soak" and hot and not hot.hanging:
            hot.hanging = block
        elif kind == "hold" and temper and not temper.hanging:
            temper.hanging = block
        elif kind in ("transfer", "quench"):
            if not last or last.kind != "valley":
                last = Column("valley", 20)
                columns.append(last)
            if kind == "transfer":
                last.above = block
            else:
                last.standing = block
        elif kind in ("check", "out") and last and last.kind == "valley":
            words = " ".join(part for part in (station["value"] if station["value"] != "not computed" else station["label"],
                                               station["unit"]) if part)
            last.rows.append((shorten(f"{block.step}{words}", NOTE_PT, LABEL_ROOM_MM), kind == "check"))
        else:
            if temperature is None:
                temperature = last.temperature_C if last else 20
            column = Column(kind, temperature)
            if kind in STANDING:
                column.standing = block
            else:
                column.hanging = Block(station, size_pt, False) if kind == "preheat" else block
            if kind == "austenitize":
                hot = column
            if kind == "temper":
                temper = column
                column.again = 0 if several_tempers else cycles_of(plan) - 1
            columns.append(column)
    return columns


def slopes_of(columns, first_mm):
    """The least width of the slope before each column, and of the run-out at the end."""
    slopes = []
    for before, column in zip([None] + columns, columns):
        if before is None:
            slopes.append(first_mm)
        elif column.kind == "valley":
            slopes.append(4)
        elif column.kind == "preheat" or column.kind == "austenitize":
            slopes.append(4)
        elif column.kind == "cold" or before.kind == "cold":
            slopes.append(4)
        elif before.kind == "temper":
            slopes.append(5 + 13 * before.again)
        else:
            slopes.append(6)
    again = columns[-1].again if columns else 0
    return slopes, 4 + 11 * again


def arrange(plan, stations, magnet_mm):
    """The largest type at which all stretches fit side by side."""
    for big_pt, small_pt, beside in (
            [(size, 18, True) for size in range(LARGEST_PT, 35, -1)]
            + [(size, 16, False) for size in range(42, WALL_PT + 1, -1)]
            + [(WALL_PT, size, False) for size in (15, 14, 13, 12, 11, 10)]
            + [(size, 10, False) for size in range(WALL_PT - 2, 10, -2)]):
        columns = columns_of(plan, stations, big_pt, small_pt, beside)
        first = 6
        ramp = sum(column.width_mm + 4 for column in columns[:_before_hot(columns)])
        first = max(first, magnet_mm + 2 - ramp)
        slopes, end = slopes_of(columns, first)
        spare = WIDTH_MM - sum(column.width_mm for column in columns) - sum(slopes) - end
        if spare >= 0:
            break
    return columns, slopes, end, max(0, spare), big_pt


def _before_hot(columns):
    for index, column in enumerate(columns):
        if column.kind == "austenitize":
            return index
    return 0


def curve(x1, y1, x2, y2):
    """A slope drawn as heat moves: level, then steep, then level."""
    half = (x2 - x1) / 2
    return f"C{svg.mm(x1 + half)} {svg.mm(y1)} {svg.mm(x2 - half)} {svg.mm(y2)} {svg.mm(x2)} {svg.mm(y2)}"


def draw_heat_line(plan, link_to):
    """The whole picture as SVG; `link_to(key)` gives (address of the note or None, outside its range)."""
    stations = stations_of(plan, link_to)
    magnet = (plan.get("austenitize") or {}).get("magnet_lets_go_C")
    magnet_words = ("magnet lets go", both_units(magnet)) if is_number(magnet) else None
    magnet_mm = max(width_mm(words, LABEL_PT) for words in magnet_words) if magnet_words else 0
    if not stations:
        return Markup("")
    columns, slopes, end, spare, big_pt = arrange(plan, stations, magnet_mm)

    cap = big_pt * POINT_MM * CAP_HEIGHT
    block = 1.9 + cap + 1.7 + 2.7
    hot_C = max([column.temperature_C for column in columns] + [100])
    valley = any(column.above for column in columns)
    top = block + 0.6
    drop = 2 * block + 2.2 if valley else block + 12
    floor = top + drop

    def level(temperature_C):
        if temperature_C <= 20:
            return floor + (4.5 if temperature_C < 0 else 0)
        return min(floor - 7, floor - drop * (temperature_C - 20) / (hot_C - 20))

    # Spare width: mostly to the slopes (not to the fall, which must look sudden), the rest to the stretches.
    soft = [index for index, column in enumerate(columns) if column.kind != "valley"]
    wider = spare * 0.6 / max(1, len(soft) + 1)
    slopes = [slope + (wider if index in soft else 0) for index, slope in enumerate(slopes)]
    stretch = spare * 0.4 / max(1, len(columns))

    path, marks, blocks = [f"M0 {svg.mm(floor)}"], [], []
    x, y, bottom = 0.0, floor, floor
    crossing = None
    for index, (column, slope) in enumerate(zip(columns, slopes)):
        before = columns[index - 1] if index else None
        start = x
        if before is not None and before.kind == "temper":
            x, y = repeat(path, before, x, y, floor)
            slope -= x - start
        target = level(column.temperature_C)
        if magnet_words and crossing is None and target < level(magnet) <= y and column.temperature_C > magnet:
            crossing = cross(x, y, x + slope, target, level(magnet))
        if column.kind == "valley":
            path.append(f"L{svg.mm(x + slope * 0.75)} {svg.mm(target)}")
        elif before is not None and before.kind == "temper" and y < floor:
            # between two tempers the work cools to hand-warm
            path.append(curve(x, y, x + slope / 2, floor))
            path.append(curve(x + slope / 2, floor, x + slope, target))
        else:
            path.append(curve(x, y, x + slope, target))
        x, y = x + slope, target
        width = column.width_mm + stretch
        path.append(f"H{svg.mm(x + width)}")
        if column.standing:
            blocks.append(column.standing.stand(x, y))
        if column.above:
            blocks.append(column.above.draw(x, top + 2.7 - 0.4, top + 2.7 - 0.4 + 1.7 + column.above.cap_mm))
        rows = column.all_rows()
        for number, (words, mark) in enumerate(rows):
            row_y = y + 4.3 + 4.3 * number
            if mark:
                marks.append(stop_mark(x + 1.4, row_y - 1.15))
            blocks.append(svg.text(x + (4 if mark else 0), row_y, words, NOTE_PT, "note", bold=mark))
            bottom = max(bottom, row_y + 1)
        if column.hanging:
            blocks.append(column.hanging.hang(x, y, len(rows)))
            hung = y + 4.3 + 4.3 * len(rows) + 1.7 + column.hanging.cap_mm
            if column.hanging.under:
                blocks.append(svg.text(x, hung + 4.2, column.hanging.under, NOTE_PT, "note"))
                hung += 4.2
            bottom = max(bottom, hung + 0.8)
        bottom = max(bottom, y)
        x += width
    if columns[-1].kind == "temper":
        x, y = repeat(path, columns[-1], x, y, floor)
    path.append(curve(x, y, WIDTH_MM, floor) if WIDTH_MM - x > 0.5 else "")

    back = []
    if magnet_words:
        magnet_y = level(magnet)
        until = crossing if crossing is not None else magnet_mm + 2
        back.append(svg.line(0, magnet_y, until, magnet_y, "magnet"))
        back.append(svg.text(0, magnet_y - 5.4, magnet_words[0], LABEL_PT, "label"))
        back.append(svg.text(0, magnet_y - 1.5, magnet_words[1], LABEL_PT, "label"))
        if crossing is not None:
            marks.append(svg.element("circle", cx=crossing, cy=magnet_y, r=1.1, class_="crossing"))
    line = svg.element("path", d=" ".join(part for part in path if part), class_="heat")
    return svg.drawing("heatline", "The heat line", description(stations, magnet_words), WIDTH_MM, bottom + 1.2,
                       *back, line, *marks, *blocks)


def repeat(path, column, x, y, floor):
    """Further tempers at the same heat: down to hand-warm and up again, without text."""
    for _ in range(column.again):
        path.append(curve(x, y, x + 3, floor))
        path.append(curve(x + 3, floor, x + 6, y))
        x += 11
        path.append(f"H{svg.mm(x)}")
    return x, y


def cross(x1, y1, x2, y2, at_y):
    """Where the curve from (x1, y1) to (x2, y2) passes the height `at_y`."""
    low, high = 0.0, 1.0
    for _ in range(30):
        t = (low + high) / 2
        y = y1 + (y2 - y1) * (3 * t * t - 2 * t ** 3)
        low, high = (t, high) if y > at_y else (low, t)
    middle = (x1 + x2) / 2
    return (1 - t) ** 3 * x1 + 3 * (1 - t) * t * middle + t ** 3 * x2


def stop_mark(x, y):
    """A small octagon: stop here and check."""
    r, k = 1.45, 0.6
    corners = [(-k, -r), (k, -r), (r, -k), (r, k), (k, r), (-k, r), (-r, k), (-r, -k)]
    return svg.polyline([(x + a, y + b) for a, b in corners], "stop", closed=True)


def description(stations, magnet_words):
    """The line in words."""
    parts = []
    for station in stations:
        value = " ".join(part for part in (station["label"], station["value"], station["unit"]) if part)
        extra = ", ".join(part for part in (station["other"], station["note"]) if part)
        parts.append(f"{value} ({extra})" if extra else value)
    if magnet_words:
        parts.append(" at ".join(magnet_words))
    return "From left to right: " + "; ".join(parts) + "."
