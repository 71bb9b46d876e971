"""A handful of helpers for drawing: SVG as escaped text, nothing more.

Every attribute and every text goes through MarkupSafe, so a title from a stranger's file cannot
become markup. Lengths are millimetres on paper; the drawing scales with the page.
"""
from markupsafe import Markup, escape

from .metrics import POINT_MM


def mm(value):
    """A coordinate with as few digits as the eye needs."""
    text = f"{value:.2f}".rstrip("0").rstrip(".")
    return "0" if text in ("-0", "") else text


def element(tag, *children, **attributes):
    """One element. A trailing underscore is dropped (class_), others become hyphens; None is left out."""
    parts = [tag]
    for name, value in attributes.items():
        if value is None:
            continue
        if isinstance(value, (int, float)):
            value = mm(value)
        parts.append(f'{name.rstrip("_").replace("_", "-")}="{escape(value)}"')
    opening = " ".join(parts)
    inside = Markup("").join(children)
    return Markup(f"<{opening}>{inside}</{tag}>" if inside else f"<{opening}/>")


def text(x, y, words, size_pt, class_="", anchor=None, bold=False):
    """One line of text with its baseline at y; `size_pt` is its size on paper."""
    return element("text", escape(words), x=x, y=y, font_size=mm(size_pt * POINT_MM), class_=class_ or None,
                   text_anchor=anchor, font_weight="700" if bold else None)


def line(x1, y1, x2, y2, class_):
    return element("line", x1=x1, y1=y1, x2=x2, y2=y2, class_=class_)


def polyline(points, class_, closed=False):
    """A broken line, or with `closed` an area, through (x, y) pairs."""
    path = "M" + " L".join(f"{mm(x)} {mm(y)}" for x, y in points) + ("Z" if closed else "")
    return element("path", d=path, class_=class_)


def link(target, *children):
    """`children` as a link to the note `target`, or as they are when there is none."""
    return element("a", *children, href=target, class_="why") if target else Markup("").join(children)


def drawing(name, title, description, width_mm, height_mm, *children, role="img"):
    """A whole picture with its name and a description in words for those who cannot see it. One that holds
    links is a "group", for a reader takes an "img" as one thing and would hide them."""
    return element("svg", element("title", escape(title), id=f"{name}-title"),
                   element("desc", escape(description), id=f"{name}-desc"), *children,
                   viewBox=f"0 0 {mm(width_mm)} {mm(height_mm)}", role=role, class_=name,
                   aria_labelledby=f"{name}-title {name}-desc")


def triangle(class_="sign"):
    """The warning sign: a triangle with a mark, drawn, so that no font or colour is needed."""
    return element(
        "svg", element("path", d="M8 1.4 15.2 14.4H.8Z", fill="none", stroke="currentColor", stroke_width="1.5",
                       stroke_linejoin="round"),
        element("path", d="M8 5.6V10", fill="none", stroke="currentColor", stroke_width="1.7", stroke_linecap="round"),
        element("circle", cx="8", cy="12.3", r="1", fill="currentColor"),
        viewBox="0 0 16 16", class_=class_, aria_hidden="true")


def octagon(x, y, radius, class_):
    """The sign for a hold point: stop here and check."""
    k = radius * 0.414
    corners = [(-k, -radius), (k, -radius), (radius, -k), (radius, k), (k, radius), (-k, radius), (-radius, k), (-radius, -k)]
    return polyline([(x + a, y + b) for a, b in corners], class_, closed=True)


def stop_sign():
    """The octagon as a picture of its own, to stand before words."""
    return element("svg", octagon(8, 8, 6.6, "stop-mark"), viewBox="0 0 16 16", class_="sign", aria_hidden="true")
