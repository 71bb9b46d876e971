"""The process sheet: a plan (its JSON, and nothing below it) becomes HTML with SVG, a file of its own, or plain text."""
from .file import open_sheet, save_sheet, sheet_css, sheet_filename
from .plaintext import sheet_text

__all__ = ["open_sheet", "render_sheet", "save_sheet", "sheet_css", "sheet_filename", "sheet_text"]


def render_sheet(plan):
    """The sheet as one HTML fragment, `<article class="sheet …">…</article>`, every text escaped."""
    from .templates import template
    from .view import view_of

    return template("sheet.html.j2").render(view_of(plan)).strip()
