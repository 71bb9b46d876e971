"""The stretches of the heat line, cut to the width of their text and set side by side across the page."""
from .heatblocks import CROWDED, SMALL_PT, Block, block_of
from .metrics import width_mm
from .words import NOT_COMPUTED, clean, is_number

WIDTH_MM = 190
LARGEST_PT, WALL_PT = 46, 32      # critical numbers: at least 32 pt, read from two metres
STANDING = ("austenitize", "quench", "temper", "cold")


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
