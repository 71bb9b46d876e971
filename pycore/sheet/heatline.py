"""The heat line: temperature against the stations of the work, the numbers standing where they belong.

One rule places everything: a temperature stands on its stretch of the line, a time hangs under it. The
width of every block of text is measured first (metrics.py), then the stretches are cut to fit, so that
nothing can overlap; the numbers are as large as the paper then allows. Not to scale in time.
"""
from markupsafe import Markup

from . import svg
from .metrics import CAP_HEIGHT, POINT_MM, shorten, width_mm, wrap
from .words import NOT_COMPUTED, both_units, clean, is_number

WIDTH_MM = 190
LARGEST_PT, WALL_PT = 46, 32      # critical numbers: at least 32 pt, read from two metres
STACKED_PT = 26                  # a number of this size has room for two small lines beside it
SMALL_PT = 9.5                    # labels and notes
ROW_MM = 4.1                      # from one small row to the next
# Most that a label or note may take before it is broken or cut, by how crowded the line is.
ROOM_MM = {"wide": 46, "middle": 46, "narrow": 40, "close": 33, "tight": 31}
SMALL_ROOM_MM = 25                # the same for a small number on a crowded line
ON_LINE, OVER_NUMBER, LABEL_CAP = 1.9, 1.7, 2.6
CROWDED = ("close", "tight")
STANDING = ("austenitize", "quench", "temper", "cold")


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
        self.value = shorten(("~" if station["outside"] else "") + station["value"], self.size_pt, 62, bold=True)
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


class Column:
    """One stretch of the line: its temperature, the block on it and what hangs under it."""

    def __init__(self, kind, temperature_C):
        self.kind, self.temperature_C = kind, temperature_C
        self.standing = self.hanging = self.above = None    # above: the transfer, high in the valley
        self.checks = []                                    # numbers of the steps that stop the work here
        self.again = 0                                      # further tempers at the same heat

    @staticmethod
    def width_mm_of(block):
        return block.width_mm if block else 0

    @property
    def width_mm(self):
        blocks = [block for block in (self.standing, self.hanging, self.above) if block]
        rows = [width_mm(row, SMALL_PT) + 3 for row in (self.standing.rows if self.standing and self.checks else [])]
        return max([block.width_mm for block in blocks] + rows + [6]) + (3.5 if self.checks else 0)


def stations_of(plan, link_to):
    """The plan's stations as plain text, faults of type mended, each with its note to link to."""
    found = []
    for raw in plan.get("stations") or []:
        key, outside = link_to(raw.get("why"))
        value = clean(raw.get("value")).replace(" × ", "\u2009×\u2009")
        found.append({"id": clean(raw.get("id")), "label": clean(raw.get("label")), "value": value or NOT_COMPUTED,
                      "unit": clean(raw.get("unit")) if value else "", "other": clean(raw.get("other")),
                      "note": clean(raw.get("note")), "order": clean(raw.get("order")), "key": key, "outside": outside,
                      "temperature_C": raw.get("temperature_C") if is_number(raw.get("temperature_C")) else None})
    return found


def hold_points(plan):
    """The numbers of the steps between quench and temper where the work stops for a check."""
    steps = [step for step in plan.get("steps") or [] if isinstance(step, dict)]
    return [clean(step.get("n")) for step in steps if step.get("id") == "check" and step.get("hold") is True]


def cycles_of(plan):
    cycles = (plan.get("temper") or {}).get("cycles")
    return max(1, min(4, int(cycles))) if is_number(cycles) else 1


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


def columns_of(plan, stations, big_pt, small_pt, mode):
    """The stations gathered into stretches of line. `mode`, from "wide" to "tight": how much of the small text
    may stand beside the numbers."""
    critical = set(name for name in plan.get("critical") or [] if isinstance(name, str))
    columns, hot, temper = [], None, None
    several_tempers = sum(s["id"].rstrip("0123456789") == "temper" for s in stations) > 1
    for station in stations:
        kind = station["id"].rstrip("0123456789")
        size_pt = big_pt if station["id"] in critical else small_pt
        temperature = station["temperature_C"]
        block = block_of(station, kind, size_pt, mode)
        last = columns[-1] if columns else None
        if kind == "soak" and hot and not hot.hanging:
            hot.hanging = block
        elif kind == "hold" and temper and not temper.hanging:
            temper.hanging = block
        elif kind in ("transfer", "quench"):
            if not last or last.kind != "valley":
                last = Column("valley", 20)
                columns.append(last)
            last.checks = hold_points(plan)
            if kind == "transfer":
                last.above = last.above or block
            else:
                last.standing = last.standing or block
                if mode in CROWDED and last.above and last.above.width_mm > last.width_mm_of(last.standing):
                    last.above = Block(last.above.station, last.above.size_pt, mode)     # its label goes above it
        elif kind == "check":
            continue                           # marked by hold_points
        else:
            if temperature is None:
                temperature = last.temperature_C if last else 20
            column = Column(kind, temperature)
            if kind in STANDING:
                column.standing = block
            else:
                column.hanging = block
            if kind == "austenitize":
                hot = column
            if kind == "temper":
                temper = column
                column.again = 0 if several_tempers else cycles_of(plan) - 1
            columns.append(column)
    return columns


def slopes_of(columns, first_mm, crowded):
    """The least width of the slope before each column, of one more temper, and of the run-out at the end."""
    short, again_mm = (3, 9) if crowded else (4, 11)
    slopes = []
    for before, column in zip([None, *columns], columns):
        if before is None:
            slopes.append(first_mm)
        elif before.kind == "temper":
            slopes.append(5 + again_mm * before.again)
        elif column.kind == "temper" and before.kind == "valley":
            slopes.append(short + 2)
        else:
            slopes.append(short)
    last = columns[-1]
    return slopes, again_mm, short + (again_mm * last.again if last.kind == "temper" else 0)


def arrange(plan, stations, magnet_mm, largest_pt):
    """The largest type at which all stretches fit side by side."""
    choices = [(size, 17, mode) for size in range(largest_pt, min(largest_pt, 34) - 1, -1) for mode in ("wide", "middle")]
    choices += [(size, 17, mode) for mode in ("narrow", *CROWDED) for size in range(min(largest_pt, 38), WALL_PT - 1, -1)]
    choices += [(WALL_PT, size, "tight") for size in (15, 13, 11, 10)]
    choices += [(size, 10, "tight") for size in range(WALL_PT - 2, 8, -2)]
    for big_pt, small_pt, mode in choices:
        columns = columns_of(plan, stations, big_pt, small_pt, mode)
        hot = next((index for index, column in enumerate(columns) if column.kind == "austenitize"), 0)
        ramp = sum(column.width_mm + 4 for column in columns[:hot])
        slopes, again_mm, end = slopes_of(columns, max(6, (magnet_mm + 2 - ramp) / 0.9), mode in CROWDED)
        spare = WIDTH_MM - sum(column.width_mm for column in columns) - sum(slopes) - end
        if spare >= 0:
            break
    return columns, slopes, again_mm, max(0, spare)


def slope_path(points):
    return "C" + " ".join(f"{svg.mm(x)} {svg.mm(y)}" for x, y in points[1:])


def slope(x1, y1, x2, y2):
    """A change of temperature: level, then steep, then level, as a Bézier's four points."""
    half = (x2 - x1) / 2
    return (x1, y1), (x1 + half, y1), (x2 - half, y2), (x2, y2)


def first_slope(x1, y1, x2, y2):
    """The first heat: slow to start, level only at the very end."""
    return (x1, y1), (x1 + (x2 - x1) * 0.7, y1), (x2 - (x2 - x1) * 0.22, y2), (x2, y2)


def draw_heat_line(plan, link_to, largest_pt=LARGEST_PT):
    """The whole picture as SVG, and its height in mm; `link_to(key)` gives the address of a number's note
    (or None) and whether it is marked."""
    stations = stations_of(plan, link_to)
    if not stations:
        return Markup(""), 0
    heat = plan.get("austenitize") if isinstance(plan.get("austenitize"), dict) else {}
    magnet = heat.get("magnet_lets_go_C")
    magnet_words = ("magnet lets go", both_units(magnet)) if is_number(magnet) else None
    magnet_mm = max(width_mm(words, SMALL_PT) for words in magnet_words) if magnet_words else 0
    columns, slopes, again_mm, spare = arrange(plan, stations, magnet_mm, largest_pt)

    hot_C = max([column.temperature_C for column in columns] + [100])
    top = max([column.standing.height_mm for column in columns if column.standing and column.kind != "valley"] + [10]) + 0.5
    drop = 22
    for column in columns:
        if column.kind == "valley":
            above, standing = column.above, column.standing
            need = (above.height_mm + len(above.rows) * ROW_MM if above else 0) + (standing.height_mm if standing else 0) + 2.5
            drop = max(drop, need)
    floor = top + drop

    def level(temperature_C):
        if temperature_C <= 20:
            return floor + (4.5 if temperature_C < 0 else 0)
        return min(floor - 7, floor - drop * (temperature_C - 20) / (hot_C - 20))

    # Spare width goes to the slopes (not to the fall, which must look sudden) and to the stretches.
    soft = [index for index, column in enumerate(columns) if column.kind != "valley"]
    wider = spare * 0.55 / (len(soft) + 1)
    slopes = [width + (wider if index in soft else 0) for index, width in enumerate(slopes)]
    stretch = spare * 0.45 / len(columns)

    path, marks, blocks = [f"M0 {svg.mm(floor)}"], [], []
    x, y, bottom, crossing = 0.0, floor, floor, None
    for index, (column, width) in enumerate(zip(columns, slopes)):
        before = columns[index - 1] if index else None
        if before is not None and before.kind == "temper":
            start = x
            x = repeat(path, before, x, y, floor, again_mm)
            width -= x - start
        target = level(column.temperature_C)
        if column.kind == "valley":
            path.append(f"L{svg.mm(x + width * 0.7)} {svg.mm(target)}")
        elif before is not None and before.kind == "temper" and y < floor:
            path.append(slope_path(slope(x, y, x + width / 2, floor)))       # between tempers: down to hand-warm
            path.append(slope_path(slope(x + width / 2, floor, x + width, target)))
        else:
            points = (first_slope if before is None else slope)(x, y, x + width, target)
            path.append(slope_path(points))
            if magnet_words and crossing is None and target < level(magnet) <= y:
                crossing = cross(points, level(magnet))
        x, y = x + width, target
        path.append(f"H{svg.mm(x + column.width_mm + stretch)}")
        bottom = max(bottom, y, draw_column(column, x, x + column.width_mm + stretch, y, top, blocks, marks))
        x += column.width_mm + stretch
    if columns[-1].kind == "temper":
        x = repeat(path, columns[-1], x, y, floor, again_mm)
    if WIDTH_MM - x > 0.5:
        path.append(slope_path(slope(x, y, WIDTH_MM - 0.5, floor)))

    back = []
    if magnet_words:
        magnet_y = level(magnet)
        back.append(svg.line(0, magnet_y, crossing if crossing is not None else magnet_mm + 2, magnet_y, "magnet"))
        back.append(svg.text(0, magnet_y - 1.5 - ROW_MM, magnet_words[0], SMALL_PT, "label"))
        back.append(svg.text(0, magnet_y - 1.5, magnet_words[1], SMALL_PT, "label"))
        if crossing is not None:
            marks.append(svg.element("circle", cx=crossing, cy=magnet_y, r=1.1, class_="crossing"))
    line = svg.element("path", d=" ".join(path), class_="heat")
    height = bottom + 1
    return svg.drawing("heatline", "The heat line", description(stations, magnet_words), WIDTH_MM, height,
                       *back, line, *marks, *blocks,
                       role="group" if any(station["key"] for station in stations) else "img"), height


def draw_column(column, x, right, y, top, blocks, marks):
    """The text of one stretch; returns how far down it reaches."""
    reach = y
    if column.standing:
        blocks.append(column.standing.draw(x, y - ON_LINE))
    if column.above:
        above = column.above
        number_y = top + above.cap_mm + (0.8 if above.aside else OVER_NUMBER + LABEL_CAP - 0.4)
        blocks.append(above.draw(x, number_y))
        small_rows(above.rows, x, number_y + 0.4, blocks)
    if column.standing and column.standing.rows:
        reach = small_rows(column.standing.rows, x, reach, blocks)
    if column.checks:
        marks.append(svg.octagon(right - 1.6, y, 1.6, "stop-mark"))
        blocks.append(svg.text(right - 1.6, y + 1.3 + ROW_MM, ", ".join(column.checks), SMALL_PT, "label", anchor="middle", bold=True))
        reach = max(reach, y + 1.3 + ROW_MM)
    if column.hanging:
        number_y = reach + 1.9 + column.hanging.cap_mm + (0 if column.hanging.aside else LABEL_CAP + OVER_NUMBER)
        blocks.append(column.hanging.draw(x, number_y))
        reach = small_rows(column.hanging.rows, x, number_y + 0.4, blocks)
    return reach + 0.6


def small_rows(rows, x, y, blocks):
    """Rows of small text, one under the other; returns the last baseline."""
    for row in rows:
        y += ROW_MM
        blocks.append(svg.text(x, y, row, SMALL_PT, "note"))
    return y


def repeat(path, column, x, y, floor, again_mm):
    """Further tempers at the same heat: down to hand-warm and up again, without text; returns where they end."""
    for _ in range(column.again):
        path.append(slope_path(slope(x, y, x + 3, floor)))
        path.append(slope_path(slope(x + 3, floor, x + 6, y)))
        x += again_mm
        path.append(f"H{svg.mm(x)}")
    return x


def cross(points, at_y):
    """Where a slope passes the height `at_y`: bisection on the Bézier, which only ever rises or falls."""
    low, high = 0.0, 1.0
    for _ in range(24):
        t = (low + high) / 2
        weights = (1 - t) ** 3, 3 * (1 - t) ** 2 * t, 3 * (1 - t) * t * t, t ** 3
        y = sum(weight * point[1] for weight, point in zip(weights, points))
        low, high = (t, high) if y > at_y else (low, t)
    return sum(weight * point[0] for weight, point in zip(weights, points))


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
