"""How large the type may be: the sheet's height is estimated before it is set.

One page is the aim, on A4 and on US Letter alike. The steps keep 11 pt where they fit and never go below
9.5 pt; the numbers on the heat line never below 32 pt. The widths are those of metrics.py.
"""
import re

from .heatline import draw_heat_line
from .metrics import POINT_MM, count_lines, wrap
from .words import WHOLE

# Paper height less two margins of 10 mm and a little air.
PAPERS = (("letter", 279.4 - 20 - 2), ("a4", 297 - 20 - 3))
# Size classes of sheet.css: number, steps in pt, foot in pt, padding above and below a step in mm,
# largest number on the heat line in pt. From 4 on, what also stands elsewhere is left out on paper, from 6 on
# the headings of the foot, from 7 on the reasons of cautions less than a danger, in 8 all (the notes keep them).
SIZES = ((1, 11.5, 10, 1.0, 46), (2, 11, 10, 0.9, 42), (3, 10.5, 9.5, 0.8, 40), (4, 10, 9.5, 0.7, 38),
         (5, 9.5, 9, 0.55, 34), (6, 9.5, 9, 0.4, 32), (7, 9.5, 9, 0.35, 32), (8, 9.5, 8.5, 0.3, 32))
TWO_PAGES = 3                  # when nothing fits on one page, two pages in comfortable type
TITLE_SIZES = ((28, 1), (24, 1), (20, 1), (17, 2), (14, 2), (12, 3))
HEAD_MM, CARE_MM, LEFT_MM = 127, 122, 50
SPLITS_MM = (52, 56, 60, 64, 68)     # possible widths of the "do" column; "look for" takes the rest of
DO_AND_LOOK_MM = 136
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


def whole(text):
    """`text` with its short parts, which the page keeps on one line, held together."""
    return " · ".join(part.replace(" ", "\xa0") if len(part) <= WHOLE else part for part in text.split(" · "))


def steps_height(steps, size, do_mm):
    """The height of all steps in mm when the "do" column is `do_mm` wide."""
    number, bench_pt, _, pad, _ = size
    bench, total = bench_pt * POINT_MM * LEADING, 0
    for step in steps:
        at = whole(" · ".join(part for part in (step["at_text"], step["time_text"]) if part))
        runs = [(step["do"] + (" stop\xa0and\xa0check" if step["hold"] else ""), True)]
        if number >= 3:
            do = count_lines(runs + [(at, False)], bench_pt, do_mm)
        else:
            do = count_lines(runs, bench_pt, do_mm) + count_lines([(at, False)], bench_pt, do_mm)
        see = " ▲\xa0" + "\xa0".join(step["cautions"]) if step["cautions"] else ""
        look = count_lines([(step["look"] + see, False)], bench_pt, DO_AND_LOOK_MM - do_mm)
        total += max(8, bench * max(do, look)) + 2 * pad + (0.45 if step["hold"] or see else 0.2)
    return total


def says_why(caution, number):
    """Whether a caution's reason is on the paper at this size class."""
    return number < 7 or (number == 7 and caution["signal"] == "danger")


def height_of(view, size, line_mm):
    """The sheet's height in mm at a size class, its parts in the order of the template; and whether the facts
    go under the hardness."""
    number, bench_pt, foot_pt, _, _ = size
    foot, dense = foot_pt * POINT_MM * LEADING, number >= 4
    title = min(view["title_pt"], 24) if dense else view["title_pt"]
    total = title * POINT_MM * 1.05 * lines(view["heading"], title, HEAD_MM, True) + 1
    head_pt = 9.5 if dense else 10
    head = head_pt * POINT_MM * LEADING
    total += head * lines(f"{view['summary']['steel']}  · {view['summary']['part']}", head_pt, HEAD_MM)
    if view["framed"]:
        total = max(total, 19.5) + 2.5 + 6
        total += foot * lines("  ".join(["xx" + view["verdict_word"]] + view["reasons"]), foot_pt, 178)
        others = [[(f"– {row['what']}", True), (f"Gives {row['gives']}.", False)] for row in view["alternatives"]]
        if dense:
            total += foot * count_lines(sum(others, []), foot_pt, 176) if others else 0
        else:
            total += foot * sum(count_lines(runs, foot_pt, 174) for runs in others)
    else:
        reasons = view["reasons"][:1] if dense else view["reasons"]
        total = max(total + head * lines(" ".join(reasons), head_pt, HEAD_MM), 19.5) + 2.5
    total += line_mm + 2 + 1 + (0.3 if dense else 4.6)
    total += min(steps_height(view["steps"], size, do_mm) for do_mm in SPLITS_MM)
    titles = 4.9 if number < 6 else 0
    left = titles + 25 + 4 + 3 * foot
    right = titles + sum(
        count_lines([(row["signal"].upper(), True), (row["text"] + (f" {row['because']}" if says_why(row, number) else ""), False)],
                    foot_pt, CARE_MM) * foot + 0.6 for row in view["cautions"])
    facts = [f"{row['name']} {plain(row['text'])}" for row in view["facts"] if not (row["spare"] and dense)]
    beside = left + 1 + foot * sum(lines(fact, foot_pt, LEFT_MM, True) for fact in facts)
    below = 1 + foot * lines("    ".join(facts), foot_pt, 178, True)
    # The facts stand under the hardness where the cautions leave that corner free, else in a row of their own.
    facts_left = beside <= max(left, right) + below
    total += 1.8 + (max(beside, right) if facts_left else max(left, right) + below)
    faults = view["faults"]
    if faults and dense:
        total += 2.2 + foot * count_lines(sum([[(row["sign"], True), (f"  {row['then'] or row['cause']}", False)] for row in faults], []), foot_pt, 184)
    elif faults:
        room = (186 - 4 * (len(faults) - 1)) / len(faults)
        total += 2.2 + foot * max(lines(row["sign"], foot_pt, room, True) + lines(f"{row['cause']} {row['then']}", foot_pt, room) for row in faults)
    return total + 9.5 + 1.2 + 3.4 * (2 if view["marked"] or view["missing"] else 1), facts_left


def fit(plan, view, link_to):
    """Sets view["heat_line"] and view["classes"]: for each paper the largest size that keeps the sheet on one page."""
    drawn = {}

    def line(largest_pt):
        if largest_pt not in drawn:
            drawn[largest_pt] = draw_heat_line(plan, link_to, largest_pt)
        return drawn[largest_pt]

    line(SIZES[-1][-1])                    # notes which numbers on the line are marked, for the legend
    view["marked"] = view["marked"]()
    smallest, classes = None, []           # the line is drawn once, for the paper with the least room
    for paper, room_mm in PAPERS:
        for size in SIZES:
            height_mm, facts_left = height_of(view, size, line(min(size[-1], (smallest or size)[-1]))[1])
            if height_mm <= room_mm:
                smallest = smallest or size
                break
        else:
            size, facts_left = SIZES[TWO_PAGES - 1], True
        heights = {do_mm: steps_height(view["steps"], size, do_mm) for do_mm in SPLITS_MM}
        do_mm = min(heights, key=lambda do_mm: (round(heights[do_mm], 1), abs(do_mm - 60)))
        classes += [f"{paper}-{size[0]}", f"{paper}-do-{do_mm}"] + ([f"{paper}-left"] if facts_left else [])
    view["heat_line"] = line((smallest or SIZES[TWO_PAGES - 1])[-1])[0]
    view["classes"] = " ".join(classes)
