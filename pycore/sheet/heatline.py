"""The heat line: temperature against the stations of the work, the numbers standing where they belong.

One rule places everything: a temperature stands on its stretch of the line, a time hangs under it. The
width of every block of text is measured first (heatblocks.py), then the stretches are cut to fit
(heatlayout.py), so that nothing can overlap; the numbers are as large as the paper then allows. Not to scale
in time.
"""
from markupsafe import Markup

from . import svg
from .heatblocks import LABEL_CAP, ON_LINE, OVER_NUMBER, ROW_MM, SMALL_PT
from .heatlayout import LARGEST_PT, WIDTH_MM, arrange, stations_of
from .metrics import width_mm
from .words import both_units, is_number


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
