"""How large the type may be: the sheet's height is estimated before it is set.

One page is the aim. The safe box of A4 and US Letter together is 254 mm high; the steps keep 11 pt
where they fit and never go below 9.5 pt. The estimate uses the same widths the heat line uses.
"""
import re

from .metrics import POINT_MM, wrap

PAGE_MM = (186, 254)
SIZES = (("large", 11.5, 10), ("medium", 10.5, 9.5), ("small", 9.5, 9.5))
LEADING = 1.22


def title_size(heading):
    """The largest size at which the title takes one line, or failing that two or three short ones."""
    for size_pt, lines in ((28, 1), (24, 1), (20, 2), (16, 2), (13, 3)):
        if len(wrap(heading, size_pt, 118, bold=True)) <= lines:
            return size_pt
    return 11


def plain(value):
    """Text without its tags, for measuring."""
    return re.sub(r"<[^>]*>", "", str(value))


def lines(text, size_pt, room_mm, bold=False):
    return len(wrap(plain(text), size_pt, room_mm, bold))


def height_of(view, bench_pt, foot_pt):
    """The sheet's height in mm at these sizes of type."""
    bench, foot = bench_pt * POINT_MM * LEADING, foot_pt * POINT_MM * LEADING
    summary = view["summary"]
    total = 9 + view["title_pt"] * POINT_MM * 1.05 * lines(view["heading"], view["title_pt"], 118, True)
    total += foot * (lines(f"{summary['steel']} · {summary['part']}", 10.5, 118) + lines(summary["shop"], 10.5, 118))
    if view["framed"]:
        total += 7 + foot * sum(lines(row, foot_pt, 170) for row in view["reasons"])
        total += foot * sum(lines(f"{row['what']} {row['gives']}", foot_pt, 165) for row in view["alternatives"])
    picture = re.search(r'viewBox="0 0 [\d.]+ ([\d.]+)"', str(view["heat_line"]))
    total += float(picture.group(1)) + 3 if picture else 0
    total += 5
    for step in view["steps"]:
        do = lines(step["do"] + ("  stop and check" if step["hold"] else ""), bench_pt + 0.5, 58, True)
        do += lines(" · ".join(part for part in (step["at_text"], step["time_text"]) if part), bench_pt - 0.5, 58)
        total += max(9, bench * max(do, lines(step["look"], bench_pt, 70))) + 2
    left = 5 + 31 + 4 * foot * 1.1 + sum(foot * lines(row["text"], foot_pt, 36) for row in view["facts"])
    right = 5 + sum(foot * lines(f"WARNING  {row['text']} {row['because']}", foot_pt, 116) + 1.2 for row in view["cautions"])
    total += max(left, right) + 4
    if view["faults"]:
        room = 186 / len(view["faults"]) - 4
        total += 2 + foot + foot * max(lines(f"{row['cause']} {row['then']}", foot_pt, room) for row in view["faults"])
    return total + 14 + 6


def choose_size(view):
    """The name of the largest size class that keeps the sheet on one page; the smallest if none does."""
    for name, bench_pt, foot_pt in SIZES:
        if height_of(view, bench_pt, foot_pt) <= PAGE_MM[1]:
            return name
    return SIZES[-1][0]
