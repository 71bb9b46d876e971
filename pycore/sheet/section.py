"""Hardness through the section, from skin to skin: as quenched and after temper, each with its band."""
import math

from markupsafe import Markup

from . import svg
from .words import is_number, number

WIDTH_MM, HEIGHT_MM = 50, 22
LEFT, RIGHT, TOP, FOOT = 6, 17, 1.6, 4.6
TEXT_PT = 9


def curves_of(profile):
    """Depths and the six curves, or None when any of it is missing or not a number."""
    if not isinstance(profile, dict):
        return None
    depths = profile.get("depth_mm")
    sets = [profile.get("as_quenched_HRC"), profile.get("final_HRC")]
    if not isinstance(depths, list) or len(depths) < 2 or not all(isinstance(part, dict) for part in sets):
        return None
    curves = [[part.get(name) for name in ("low", "mid", "high")] for part in sets]
    for values in [depths] + curves[0] + curves[1]:
        if not isinstance(values, list) or len(values) != len(depths) or not all(map(is_number, values)):
            return None
    if depths[-1] <= depths[0]:
        return None
    return depths, curves[0], curves[1]


def draw_section(plan):
    """The picture as SVG, or None when the plan has no profile."""
    profile = plan.get("profile")
    found = curves_of(profile)
    if found is None:
        return None
    depths, quenched, tempered = found
    values = [value for curve in quenched + tempered for value in curve]
    aim = [value for value in (plan.get("aim") or {}).get("HRC") or [] if is_number(value)]
    low, high = math.floor(min(values + aim) / 5) * 5, math.ceil(max(values + aim) / 5) * 5
    if high - low < 10:
        low = high - 10
    plot_w, plot_h = WIDTH_MM - LEFT - RIGHT, HEIGHT_MM - TOP - FOOT

    def height(hrc):
        return TOP + plot_h * (high - hrc) / (high - low)

    def mirrored(curve):
        """The curve across the whole section, skin to skin."""
        half = [((depth - depths[0]) / (depths[-1] - depths[0]) / 2, hrc) for depth, hrc in zip(depths, curve)]
        whole = half + [(1 - across, hrc) for across, hrc in reversed(half[:-1])]
        return [(LEFT + plot_w * across, height(hrc)) for across, hrc in whole]

    parts = []
    step = 10 if high - low > 20 else 5
    for tick in range(int(math.ceil(low / step) * step), int(high) + 1, step):
        y = height(tick)
        parts.append(svg.line(LEFT, y, LEFT + plot_w, y, "grid"))
        parts.append(svg.text(LEFT - 1.4, y + 1.15, str(tick), TEXT_PT, "tick", anchor="end"))
    parts.append(svg.polyline(mirrored(quenched[2]) + mirrored(quenched[0])[::-1], "band", closed=True))
    parts.append(svg.polyline(mirrored(quenched[1]), "quenched"))
    parts.append(svg.polyline(mirrored(tempered[2]), "edge"))
    parts.append(svg.polyline(mirrored(tempered[0]), "edge"))
    parts.append(svg.polyline(mirrored(tempered[1]), "tempered"))
    parts.append(svg.polyline([(LEFT, TOP - 1), (LEFT, TOP + plot_h), (LEFT + plot_w, TOP + plot_h),
                               (LEFT + plot_w, TOP - 1)], "frame"))

    # The names stand at the right end of their curves, pushed apart where the curves are close.
    first, second = height(quenched[1][0]), height(tempered[1][0])
    if abs(second - first) < 4:
        middle = (first + second) / 2
        first, second = (middle - 2, middle + 2) if first <= second else (middle + 2, middle - 2)
    parts.append(svg.text(LEFT + plot_w + 1.2, first + 1.15, "quenched", TEXT_PT, "name"))
    parts.append(svg.text(LEFT + plot_w + 1.2, second + 1.15, "tempered", TEXT_PT, "name", bold=True))
    base = HEIGHT_MM - 1
    across = profile.get("width_mm")
    size = ""
    if is_number(across):
        size = f", {number(across / 25.4)} in" if plan.get("units") == "in" else f", {number(across)} mm"
    parts.append(svg.text(LEFT + plot_w / 2, base, "skin to skin" + size, TEXT_PT, "tick", anchor="middle"))
    words = (f"From skin to skin{size}. As quenched {number(quenched[1][0])} HRC at the skin and "
             f"{number(quenched[1][-1])} at the centre; after temper {number(tempered[1][0])} and "
             f"{number(tempered[1][-1])}. The grey band and the thin lines are the ranges; the table has the numbers.")
    return svg.drawing("section", "Hardness through the section", words, WIDTH_MM, HEIGHT_MM, *parts)


def nothing_to_draw(reason):
    return Markup('<p class="missing">not computed{}</p>').format(f": {reason}" if reason else "")
