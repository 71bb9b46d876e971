"""How large the type may be: the sheet's height is estimated before it is set.

One page is the aim, on A4 and on US Letter alike. The steps keep 11 pt where they fit and never go below
9.5 pt; the numbers on the heat line never below 32 pt. The widths are those of metrics.py.
"""
import re

from .heatline import draw_heat_line
from .metrics import POINT_MM, count_lines, wrap
from .words import WHOLE

# Paper height less two margins of 10 mm and a little air.
PAPERS = (("letter", 279.4 - 20 - 1.8), ("a4", 297 - 20 - 1.8))
# Size classes of sheet.css: number, steps in pt, foot in pt, padding above and below a step in mm,
# largest number on the heat line in pt. From 4 on, what also stands elsewhere is left out on paper, from 6 on
# the headings of the foot, in 8 the reasons of cautions less than a danger, in 9 all (the notes keep them).
SIZES = ((1, 11.5, 10, 1.0, 46), (2, 11, 10, 0.9, 42), (3, 10.5, 9.5, 0.8, 40), (4, 10, 9.5, 0.7, 38),
         (5, 9.5, 9, 0.55, 34), (6, 9.5, 9, 0.4, 32), (7, 9.5, 8.5, 0.35, 32), (8, 9.5, 8.5, 0.3, 32), (9, 9.5, 8.5, 0.2, 32))
SPARE_PAD = 0.8                # what is left of the page goes to the steps, at most so many mm above and below each
TITLE_SIZES = ((28, 1), (24, 1), (20, 1), (17, 2), (14, 2), (12, 3))
SHEET_MM, HEAD_MM, CARE_MM, LEFT_MM = 190, 122, 124.5, 50
SPLITS_MM = (52, 56, 60, 64, 68)     # possible widths of the "do" column; "look for" takes the rest of
DO_AND_LOOK_MM = 143
LEADING = 1.2
AIR_MM = 0.6                   # a browser may round a line this much wider
GAP = "\xa0" * 4               # between two facts, about 4 mm


def title_size(heading):
    """The largest size at which the title takes one line, or failing that two or three short ones."""
    for size_pt, rows in TITLE_SIZES:
        if len(wrap(heading, size_pt, HEAD_MM, bold=True)) <= rows:
            return size_pt
    return TITLE_SIZES[-1][0]


def plain(value):
    """Text without its tags, for measuring."""
    return re.sub(r"<[^>]*>", "", value) if "<" in value else str(value)


def lines(text, size_pt, room_mm, bold=False):
    return count_lines([(plain(text), bold)], size_pt, room_mm)


def whole(text):
    """`text` with its short parts, which the page keeps on one line, held together."""
    return " · ".join(part.replace(" ", "\xa0") if len(part) <= WHOLE else part for part in text.split(" · ")).replace(" · ", "\xa0· ")


def runs_of(step):
    """What a step's first two columns hold, as runs of (text, bold) to be measured."""
    at = whole(" · ".join(part for part in (step["at_text"], step["time_text"]) if part))
    do = step["do"] + (" stop\xa0and\xa0check\xa0\xa0\xa0\xa0\xa0\xa0" if step["hold"] else "")
    see = " ▲\xa0" + "\xa0".join(step["cautions"]) if step["cautions"] else ""
    return [(do, True)], [(at, False)], [(step["look"] + see, False)], 0.8 if step["hold"] else 0.5 if see else 0.3


def steps_height(steps, size, do_mm):
    """The height in mm of all steps (as runs_of gives them) when the "do" column is `do_mm` wide."""
    number, bench_pt, _, pad, _ = size
    bench, total = bench_pt * POINT_MM * LEADING, 0
    do_room, look_room = do_mm - AIR_MM, DO_AND_LOOK_MM - do_mm - AIR_MM
    for do, at, look, rule_mm in steps:
        if number >= 3:
            left = count_lines(do + at, bench_pt, do_room)
        else:
            left = count_lines(do, bench_pt, do_room) + count_lines(at, bench_pt, do_room)
        right = count_lines(look, bench_pt, look_room)
        total += max(8, bench * max(left, right)) + 2 * pad + rule_mm
    return total


def says_why(caution, number):
    """Whether a caution's reason is on the paper at this size class."""
    return number < 8 or (number == 8 and caution["signal"] == "danger")


def height_of(view, size, line_mm):
    """At a size class: the height in mm down to the last step, the height of the rest, both in the order of the
    template; and whether the facts go under the hardness."""
    number, bench_pt, foot_pt, _, _ = size
    foot, dense = foot_pt * POINT_MM * LEADING, number >= 4
    title = min(view["title_pt"], 22 if number == 9 else 24) if dense else view["title_pt"]
    head_pt = 9.5 if dense else 10
    head = head_pt * POINT_MM * LEADING
    total = max(title * POINT_MM * 1.05 * lines(view["heading"], title, HEAD_MM, True), 9.2 if number == 9 else 10.6) + 2.2
    total += head * lines(f"{view['summary']['steel']}  · {view['summary']['part']}", head_pt, SHEET_MM - 2)
    reasons = view["reasons"][:1] if dense and not view["framed"] else view["reasons"]
    said = [(f"{view['verdict_word']}.", True), (" ".join(reasons), False)]
    if view["framed"]:
        total += (4.8 if number == 9 else 5.6) + foot * count_lines([("xx", True), *said], foot_pt, SHEET_MM - 7)
        others = [[(f"– {row['what']}", True), (f"Gives {row['gives']}." if row["gives"] else "", False)] for row in view["alternatives"]]
        if dense:
            total += foot * count_lines([run for runs in others for run in runs], foot_pt, SHEET_MM - 12) if others else 0
        else:
            total += foot * sum(count_lines(runs, foot_pt, SHEET_MM - 10) for runs in others)
    else:
        total += head * count_lines(said, head_pt, SHEET_MM - 2)
    total += line_mm + 2 + 1 + (0.3 if dense else 4.6)
    total += min(steps_height(view["runs"], size, do_mm) for do_mm in SPLITS_MM)
    upper, total = total, 0
    titles = 4.9 if number < 6 else 0
    left = titles + 22 + 5.2 + 3 * foot
    right = titles
    for row in view["cautions"]:
        said = [row["text"], row["because"] if says_why(row, number) else "", view["more_cautions"] if row is view["cautions"][-1] else ""]
        right += 0.6 + foot * count_lines([(row["signal"].upper(), True)] + [(text, False) for text in said], foot_pt, CARE_MM)
    facts = [[(row["name"], False), (plain(row["text"]), True)] for row in view["facts"] if not (row["spare"] and dense)]
    beside = left + 1 + foot * sum(count_lines(fact, foot_pt, LEFT_MM) for fact in facts)
    below = 1 + foot * count_lines([(text.replace(" ", "\xa0") + GAP * bold, bold) for fact in facts for text, bold in fact],
                                   foot_pt, SHEET_MM + 4)
    # The facts stand under the hardness where the cautions leave that corner free, else in a row of their own.
    facts_left = beside <= max(left, right) + below
    total += 2 + (max(beside, right) if facts_left else max(left, right) + below)
    faults = view["faults"]
    if faults and dense:
        total += 2.4 + foot * count_lines(sum([[(row["sign"], True), (f"  {row['then'] or row['cause']}", False)] for row in faults], []), foot_pt, SHEET_MM - 2)
    elif faults:
        room = (SHEET_MM - 4 * (len(faults) - 1)) / len(faults)
        total += 2.4 + foot * max(lines(row["sign"], foot_pt, room, True) + lines(f"{row['cause']} {row['then']}", foot_pt, room) for row in faults)
    return upper, total + 9.5 + 1.5 + 3.4 * (2 if view["marked"] or view["missing"] else 1), facts_left


def fit(plan, view, link_to):
    """Sets view["heat_line"] and view["classes"]: for each paper the largest size that keeps the sheet on one page."""
    drawn = {}

    def line(largest_pt):
        if largest_pt not in drawn:
            drawn[largest_pt] = draw_heat_line(plan, link_to, largest_pt)
        return drawn[largest_pt]

    view["runs"] = [runs_of(step) for step in view["steps"]]
    line(SIZES[-1][-1])                    # notes which numbers on the line are marked, for the legend
    view["marked"] = view["marked"]()
    tallest, classes = SIZES[0], []        # the line is drawn once, for the paper with the least room
    for paper, room_mm in PAPERS:
        size, pages, facts_left, spare_mm = choose(view, room_mm, tallest, line)
        tallest = min(tallest, size, key=lambda one: one[-1])
        heights = {do_mm: steps_height(view["runs"], size, do_mm) for do_mm in SPLITS_MM}
        do_mm = min(heights, key=lambda do_mm: (round(heights[do_mm], 1), abs(do_mm - 60)))
        pad = int(10 * min(SPARE_PAD, max(0, spare_mm) / (2 * len(view["steps"]) + 1)))
        classes += [f"{paper}-{size[0]}", f"{paper}-do-{do_mm}", f"{paper}-pad-{pad}"]
        classes += [f"{paper}-left"] if facts_left else []
        classes += [f"{paper}-two"] if pages == 2 else []
    view["heat_line"] = line(tallest[-1])[0]
    view["classes"] = " ".join(classes)


def choose(view, room_mm, tallest, line):
    """The largest size class that takes one page; failing that, the largest that takes two, the steps on the first."""
    def need(size, pages):
        """(height needed of the fuller page, of the page with the steps, whether the facts go to the left)."""
        upper_mm, lower_mm, facts_left = height_of(view, size, line(min(size[-1], tallest[-1]))[1])
        first_mm = upper_mm + (lower_mm if pages == 1 else 1)
        return max(first_mm, lower_mm + 8 if pages == 2 else 0), first_mm, facts_left

    for pages in (1, 2):
        low, high = 0, len(SIZES)          # the sizes only ever need less height, so halve the choice each time
        while low < high:
            middle = (low + high) // 2
            if need(SIZES[middle], pages)[0] <= room_mm:
                high = middle
            else:
                low = middle + 1
        if low < len(SIZES):
            _, first_mm, facts_left = need(SIZES[low], pages)
            return SIZES[low], pages, facts_left, room_mm - first_mm
    return SIZES[-1], 2, True, 0
