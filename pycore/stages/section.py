"""The part as heat sees it: what governs soak and depth, what is thinnest, what it weighs."""

from dataclasses import dataclass

from pycore.physics import sections
from pycore.stages.notes import mark

TIP_LENGTH_BY_SECTION = 2.0  # common practice: a tip is hardened for about twice its thickness
EDGE_SHARE_OF_WIDTH = 0.35  # common practice: a third of a blade's width
PLATE_FROM_ASPECT = 4.0  # a flat wider than this is taken as a plate


@dataclass(frozen=True)
class Section:
    geometry: str  # slab, cylinder or sphere
    half_thickness_mm: float  # half the thickness or the radius that governs
    width_mm: float  # full section through which hardness is told
    thinnest_mm: float
    zone_mm: float | None
    mass_kg: float  # one piece
    hot_mass_kg: float  # what goes hot into the bath
    length_mm: float
    aspect_note: str
    marks: tuple


def section_of(job):
    """Section from a job's part."""
    part, d, marks = job.part, job.part.dimensions_mm, []
    thick = d[{"square": "width", "flat": "thickness", "wedge": "spine"}.get(part.shape, "diameter")]
    length = d.get("length")
    if length is None and part.shape != "ball":
        length = 10 * thick
        marks.append(
            mark(
                "part.dimensions_mm.length",
                f"length not given: mass and bath are for {length:g} mm, ten times the section",
            )
        )
    zone_mm = part.zone_mm
    if part.zone == "tip" and zone_mm is None:
        zone_mm = min(max(15.0, TIP_LENGTH_BY_SECTION * thick), 0.5 * length if length else thick)
    if part.zone == "edge" and zone_mm is None:
        zone_mm = EDGE_SHARE_OF_WIDTH * d.get("width", thick)
    geometry, half, width, said = _one_dimension(part, d, length, zone_mm, marks)
    thinnest = part.thinnest_mm or min([2 * half, *(v for k, v in d.items() if k in ("edge", "thickness", "spine"))])
    mass = float(sections.solid_mass_kg(sections.volume_mm3(part.shape, d, length or 0.0)))
    hot = mass
    if part.zone == "tip" and length:
        hot = mass * min(1.0, 1.5 * zone_mm / length)  # heat runs back half as far again
    return Section(geometry, half, width, thinnest, zone_mm, mass, hot, length or d.get("diameter"), said, tuple(marks))


def _one_dimension(part, d, length, zone_mm, marks):
    """(geometry, half thickness, width told, how it was taken)."""
    shape = part.shape
    if shape == "ball":
        return "sphere", d["diameter"] / 2, d["diameter"], "a ball"
    if shape == "round":
        if length < d["diameter"]:
            return "slab", length / 2, length, "a disc, cooled from both faces"
        if length < 2 * d["diameter"]:
            marks.append(
                mark("as_quenched", "short piece: its ends cool too, so the middle hardens a little deeper than told")
            )
        return "cylinder", d["diameter"] / 2, d["diameter"], "a long round bar"
    if shape == "square":
        if length < d["width"]:
            return "slab", length / 2, length, "a plate, cooled from both faces"
        D = sections.equivalent_round_mm(d["width"], d["width"])
        return "cylinder", D / 2, d["width"], f"a round of {D:.1f} mm that cools alike"
    if shape == "tube":
        wall = (d["diameter"] - d["bore"]) / 2
        if d["bore"] < 0.3 * d["diameter"]:
            return (
                "cylinder",
                d["diameter"] / 2,
                d["diameter"],
                "a solid round: the bore is too small to quench through",
            )
        marks.append(
            mark("as_quenched", "tube: taken as wetted inside and out; a bath that does not run through hardens less")
        )
        return "slab", wall / 2, wall, "a wall cooled from both faces"
    if shape == "taper":
        D = d["diameter"]
        if part.zone == "tip":
            D = d["edge"] + (d["diameter"] - d["edge"]) * min(1.0, zone_mm / length)
        return "cylinder", D / 2, D, f"a round of {D:.1f} mm, the thickest of what is hardened"
    if shape == "wedge":
        thick = d["spine"]
        if part.zone == "edge":
            thick = d["edge"] + (d["spine"] - d["edge"]) * min(1.0, zone_mm / d["width"])
        return "slab", thick / 2, thick, f"a plate of {thick:.1f} mm, the thickest of what is hardened"
    thickness, width = d["thickness"], d["width"]
    if length is not None and length < thickness:
        return "slab", length / 2, length, "a plate, cooled from both faces"
    if width / thickness >= PLATE_FROM_ASPECT:
        return "slab", thickness / 2, thickness, "a plate, cooled from both faces"
    D = sections.equivalent_round_mm(thickness, width)
    return "cylinder", D / 2, thickness, f"a round of {D:.1f} mm that cools alike"
