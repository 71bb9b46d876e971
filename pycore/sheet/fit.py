"""How large the type may be: the sheet's height is estimated before it is set.

One page is the aim, on A4 and on US Letter alike. The steps keep 11 pt where they fit and never go below
9.5 pt; the numbers on the heat line never below 32 pt. The widths are those of metrics.py.
"""
import re

from .heatline import draw_heat_line
from .metrics import POINT_MM, count_lines, wrap

# Paper height less two margins of 10 mm and a little air.
PAPERS = (("letter", 279.4 - 20 - 2), ("a4", 297 - 20 - 3))
# Size classes of sheet.css: number, steps in pt, foot in pt, padding above and below a step in mm,
# largest number on the heat line in pt. From 4 on, what also stands elsewhere is left out on paper, from 6 on
# the headings of the foot, in 7 the reasons of the cautions (they stay in the notes).
SIZES = ((1, 11.5, 10, 1.0, 46), (2, 11, 10, 0.9, 42), (3, 10.5, 9.5, 0.8, 40), (4, 10, 9.5, 0.7, 38),
         (5, 9.5, 9, 0.55, 34), (6, 9.5, 9, 0.4, 32), (7, 9.5, 9, 0.35, 32))
TWO_PAGES = 3                  # when nothing fits on one page, two pages in comfortable type
TITLE_SIZES = ((28, 1), (24, 1), (20, 1), (17, 2), (14, 2), (12, 3))
HEAD_MM, DO_MM, LOOK_MM, CARE_MM = 130, 62, 70, 119
LEADING = 1.2


def title_size(heading):
    """The largest size at which the title takes one line, or failing that two or three short ones."""
    for size_pt, rows in TITLE_SIZES:
        if len(wrap(heading, size_pt, HEAD_MM, bold=True)) <= rows:
            return size_pt
    return TITLE_SIZES[-1][0]


def plain(value):
    """Text without its tags, for measuring."""
    return re.sub(r"<[^>]*>", "", str(value))


def lines(text, size_pt, room_mm, bold=False):
    return count_lines([(plain(text), bold)], size_pt, room_mm)


def height_of(view, size, line_mm):
    """The sheet's height in mm at a size class, its parts in the order of the template."""
    number, bench_pt, foot_pt, pad, _ = size
    bench, foot, dense = bench_pt * POINT_MM * LEADING, foot_pt * POINT_MM * LEADING, number >= 5
    title = view["title_pt"]
    total = title * POINT_MM * 1.05 * lines(view["heading"], title, HEAD_MM, True) + 1
    total += 4.25 * lines(f"{view['summary']['steel']} · {view['summary']['part']}", 10, HEAD_MM)
    if view["framed"]:
        total = max(total, 19.5) + 2.5 + 6 + foot * lines("  ".join([view["verdict_word"] + "xx"] + view["reasons"]), foot_pt, 178)
        total += foot * sum(lines(f"– {row['what']} Gives {row['gives']}.", foot_pt, 172, True) for row in view["alternatives"])
    else:
        total = max(total + 4.25 * lines(" ".join(view["reasons"]), 10, HEAD_MM), 19.5) + 2.5
    total += line_mm + 2 + 1 + (0.3 if dense else 4.6)
    for step in view["steps"]:
        at = " · ".join(part for part in (step["at_text"], step["time_text"]) if part)
        runs = [(step["do"] + (" stop and check" if step["hold"] else ""), True)]
        if number >= 3:
            do = count_lines(runs + [(at, False)], bench_pt, DO_MM)
        else:
            do = count_lines(runs, bench_pt, DO_MM) + lines(at, bench_pt, DO_MM)
        look = lines(step["look"] + (" ▲" + " B" * len(step["cautions"]) if step["cautions"] else ""), bench_pt, LOOK_MM)
        total += max(8, bench * max(do, look)) + 2 * pad + (0.4 if step["hold"] else 0.2)
    left = (4.9 if number < 6 else 0) + 26 + 4 + 3 * foot
    right = (4.9 if number < 6 else 0) + sum(
        count_lines([(row["signal"].upper(), True), (f"{row['text']} {row['because'] if number < 7 else ''}", False)], foot_pt, CARE_MM) * foot + 0.6
        for row in view["cautions"])
    total += max(left, right) + 1.8
    total += 1 + foot * lines("    ".join(f"{row['name']} {plain(row['text'])}" for row in view["facts"]
                                          if not (row["spare"] and dense)), foot_pt, 178, True)
    if view["faults"]:
        room = (186 - 4 * (len(view["faults"]) - 1)) / len(view["faults"])
        total += 2.2 + foot + foot * max(
            lines(row["then"] if dense and row["then"] else f"{row['cause']} {row['then']}", foot_pt, room) for row in view["faults"])
    return total + 9.5 + 1.2 + 3.4 * (2 if view["marked"] or view["missing"] else 1)


def fit(plan, view, link_to):
    """Sets view["heat_line"] and, for each paper, the largest size class that keeps the sheet on one page."""
    drawn = {}

    def line(largest_pt):
        if largest_pt not in drawn:
            drawn[largest_pt] = draw_heat_line(plan, link_to, largest_pt)
        return drawn[largest_pt]

    line(SIZES[-1][-1])                    # notes which numbers on the line are marked, for the legend
    view["marked"] = view["marked"]()
    smallest = None                        # the line is drawn once, for the paper with the least room
    for paper, room_mm in PAPERS:
        for size in SIZES:
            if height_of(view, size, line(min(size[-1], (smallest or size)[-1]))[1]) <= room_mm:
                smallest = smallest or size
                break
        else:
            size = SIZES[TWO_PAGES - 1]
        view[paper] = size[0]
    view["heat_line"] = line((smallest or SIZES[TWO_PAGES - 1])[-1])[0]
