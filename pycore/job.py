"""The job: what the smith states. Parsing names every fault at once and changes nothing that was right."""

from dataclasses import dataclass

from pycore import words
from pycore.data import number, table
from pycore.errors import Fault, InputErrors
from pycore.reading import LARGEST_MM, SMALLEST_MM, Reader, as_number

SCHEMA = "quenchwright.job/1"
LARGEST_LENGTH_MM = 10000.0
LOWEST_TEMPER_C = 100.0  # an oven that cannot reach boiling water's heat tempers nothing
HARDNESS_RANGE_HRC = (20.0, 68.0)


@dataclass(frozen=True)
class Part:
    shape: str
    dimensions_mm: dict
    thinnest_mm: float | None
    features: tuple
    zone: str
    zone_mm: float | None
    condition: str


@dataclass(frozen=True)
class Heat:
    kind: str
    accuracy_C: float | None
    max_C: float | None
    atmosphere: str
    pyrometer: bool


@dataclass(frozen=True)
class Bath:
    medium: str
    volume_L: float | None
    temperature_C: float
    agitation: str


@dataclass(frozen=True)
class TemperOven:
    kind: str
    max_C: float
    accuracy_C: float | None


@dataclass(frozen=True)
class Job:
    title: str
    quantity: int
    grade: str | None
    chemistry: dict | None
    grain_size: float | None
    part: Part
    use: str | None
    hardness_HRC: tuple | None
    heat: Heat
    baths: tuple
    temper: TemperOven
    cold: str
    units: str
    decided: dict

    def to_json(self):
        """The job in its own format, every default written out."""
        part, heat, temper = self.part, self.heat, self.temper
        steel = {"grade": self.grade} if self.grade else {"chemistry": dict(self.chemistry)}
        if self.grain_size is not None:
            steel["grain_size"] = self.grain_size
        aim = {}
        if self.use:
            aim["use"] = self.use
        if self.hardness_HRC:
            aim["hardness_HRC"] = list(self.hardness_HRC)
        job = {
            "schema": SCHEMA,
            "title": self.title,
            "quantity": self.quantity,
            "units": self.units,
            "steel": steel,
            "part": _present(
                {
                    "shape": part.shape,
                    "dimensions_mm": dict(part.dimensions_mm),
                    "thinnest_mm": part.thinnest_mm,
                    "features": list(part.features),
                    "zone": part.zone,
                    "zone_mm": part.zone_mm,
                    "condition": part.condition,
                }
            ),
            "aim": aim,
            "shop": {
                "heat": _present(
                    {
                        "kind": heat.kind,
                        "accuracy_C": heat.accuracy_C,
                        "max_C": heat.max_C,
                        "atmosphere": heat.atmosphere,
                        "pyrometer": heat.pyrometer,
                    }
                ),
                "baths": [
                    _present(
                        {
                            "medium": bath.medium,
                            "volume_L": bath.volume_L,
                            "temperature_C": bath.temperature_C,
                            "agitation": bath.agitation,
                        }
                    )
                    for bath in self.baths
                ],
                "temper": _present({"kind": temper.kind, "max_C": temper.max_C, "accuracy_C": temper.accuracy_C}),
                "cold": self.cold,
            },
        }
        if self.decided:
            job["decided"] = dict(self.decided)
        return job


def _present(fields):
    return {name: value for name, value in fields.items() if value is not None}


def parse_job(data):
    """Job from a dictionary. InputErrors with every fault at once: field, value, what would be accepted."""
    read = Reader()
    if not isinstance(data, dict):
        raise InputErrors([Fault("job", data, "an object with steel, part, aim and shop")])
    schema = data.get("schema", SCHEMA)
    if schema != SCHEMA:
        read.fault("schema", schema, SCHEMA)
    shop = read.section(data, "shop", "shop")
    units_holder = data if data.get("units") is not None else shop
    units = (
        read.word(units_holder, "units", "units" if units_holder is data else "shop.units", words.UNITS, "mm") or "mm"
    )
    steel = _steel(read, data)
    part = _part(read, data, units)
    use, hardness = _aim(read, data)
    heat = _heat(read, shop)
    baths = _baths(read, shop)
    temper = _temper(read, shop)
    cold = read.word(shop, "cold", "shop.cold", words.COLDS, "none")
    decided = _decided(read, data)
    title = read.text(data, "title", "title")
    quantity = read.number(data, "quantity", "quantity", 1, 10000, "", whole=True) or 1
    _check_heat_reaches(read, steel["grade"], heat)
    if decided.get("medium") and all(bath.medium != decided["medium"] for bath in baths):
        read.fault("decided.medium", decided["medium"], "one of the baths in shop.baths")
    if read.faults:
        raise InputErrors(read.faults)
    return Job(
        title=title or _default_title(use),
        quantity=quantity,
        part=part,
        use=use,
        hardness_HRC=hardness,
        heat=heat,
        baths=baths,
        temper=temper,
        cold=cold,
        units=units,
        decided=decided,
        **steel,
    )


def _default_title(use):
    row = words.find_row("uses", use) if use else None
    return row["name"] if row else "Part"


def _steel(read, data):
    section = read.section(data, "steel", "steel")
    result = {"grade": None, "chemistry": None, "grain_size": None}
    result["grain_size"] = read.number(section, "grain_size", "steel.grain_size", 1, 12, "(ASTM grain size)")
    given = [key for key in ("grade", "chemistry", "unknown") if section.get(key) not in (None, "")]
    if len(given) != 1 or given == ["unknown"]:
        if section or not read.faults or all(fault.path != "steel" for fault in read.faults):
            read.fault(
                "steel", ", ".join(given) or None, "either a grade of the library or the chemistry of a certificate"
            )
        return result
    if given == ["grade"]:
        row = words.find_row("grades", section["grade"]) if isinstance(section["grade"], str) else None
        if row is None:
            known = ", ".join(row["id"] for row in table("grades"))
            read.fault("steel.grade", section["grade"], f"one of {known}, or a certificate's chemistry")
        else:
            result["grade"] = row["id"]
        return result
    chemistry = section["chemistry"]
    if not isinstance(chemistry, dict):
        read.fault("steel.chemistry", chemistry, "elements and their wt %, such as C 0.45, Mn 0.75")
        return result
    found = {}
    for element, value in chemistry.items():
        path = f"steel.chemistry.{str(element)[:20]}"
        if element not in words.ELEMENTS:
            read.fault(path, value, "an element among " + ", ".join(words.ELEMENTS))
        else:
            low = 0.10 if element == "C" else 0.0
            amount = read.number(chemistry, element, path, low, words.ELEMENTS[element], "wt %")
            if amount is not None:
                found[element] = amount
    if chemistry.get("C") in (None, ""):
        read.fault("steel.chemistry.C", None, "the carbon of the certificate, 0.1 to 2 wt %")
    result["chemistry"] = found
    return result


def _part(read, data, units):
    section = read.section(data, "part", "part")
    shape = read.word(section, "shape", "part.shape", words.SHAPES)
    typed = read.section(section, "dimensions_mm", "part.dimensions_mm")
    dimensions = {}
    if shape:
        _, needed, optional = words.SHAPES[shape]
        for name in needed + optional:
            high = LARGEST_LENGTH_MM if name == "length" else LARGEST_MM
            low = 0.1 if name == "edge" else SMALLEST_MM
            value = read.length(
                typed, name, f"part.dimensions_mm.{name}", units, low=low, high=high, required=name in needed
            )
            if value is not None:
                dimensions[name] = value
        _check_geometry(read, shape, dimensions)
    thickest = max((v for k, v in dimensions.items() if k != "length"), default=LARGEST_MM)
    thinnest = read.length(section, "thinnest_mm", "part.thinnest_mm", units, low=0.1, high=thickest)
    features = section.get("features") or []
    if not isinstance(features, (list, tuple)):
        read.fault("part.features", features, "a list of " + ", ".join(words.FEATURES))
        features = []
    kept = []
    for i, feature in enumerate(features):
        found = words.find_word(feature, words.FEATURES) if isinstance(feature, str) else None
        if found is None:
            read.fault(f"part.features[{i}]", feature, "one of " + ", ".join(words.FEATURES))
        elif found not in kept:
            kept.append(found)
    zone = read.word(section, "zone", "part.zone", words.ZONES, "all")
    longest = dimensions.get("length") or LARGEST_LENGTH_MM
    zone_mm = read.length(section, "zone_mm", "part.zone_mm", units, low=1.0, high=longest)
    condition = read.word(section, "condition", "part.condition", words.CONDITIONS, "unknown")
    return Part(shape, dimensions, thinnest, tuple(kept), zone, zone_mm if zone != "all" else None, condition)


def _check_geometry(read, shape, d):
    """Geometry that cannot be: a bore wider than its tube, an edge thicker than its spine."""

    def smaller(small, large, what):
        if small in d and large in d and d[small] >= d[large]:
            read.fault(f"part.dimensions_mm.{small}", d[small], f"less than the {what} ({d[large]:g} mm)")

    if shape == "tube":
        smaller("bore", "diameter", "diameter")
    elif shape == "wedge":
        smaller("edge", "spine", "spine thickness")
    elif shape == "taper":
        smaller("edge", "diameter", "large diameter")
    elif shape == "flat" and "thickness" in d and "width" in d and d["thickness"] > d["width"]:
        read.fault("part.dimensions_mm.thickness", d["thickness"], f"at most the width ({d['width']:g} mm)")


def _aim(read, data):
    section = read.section(data, "aim", "aim")
    use, hardness = None, None
    if section.get("use") not in (None, ""):
        row = words.find_row("uses", section["use"]) if isinstance(section["use"], str) else None
        if row is None:
            read.fault("aim.use", section["use"], "one of " + ", ".join(row["id"] for row in table("uses")))
        else:
            use = row["id"]
    typed = section.get("hardness_HRC")
    if typed not in (None, "", []):
        low, high = HARDNESS_RANGE_HRC
        expected = f"two numbers from {low:g} to {high:g} HRC, the lower first, such as [56, 59]"
        pair = [as_number(value) for value in typed] if isinstance(typed, (list, tuple)) else []
        if len(pair) != 2 or None in pair or not low <= pair[0] <= pair[1] <= high:
            read.fault("aim.hardness_HRC", typed, expected)
        else:
            hardness = tuple(pair)
    if use is None and hardness is None and not any(fault.path.startswith("aim") for fault in read.faults):
        read.fault("aim", None, "a use from the list or a hardness range in HRC")
    return use, hardness


def _heat(read, shop):
    section = read.section(shop, "heat", "shop.heat")
    kind = read.word(section, "kind", "shop.heat.kind", words.HEATS) if isinstance(shop.get("heat"), dict) else None
    pyrometer = section.get("pyrometer")
    if pyrometer is None:
        pyrometer = kind in ("kiln", "salt")
    elif not isinstance(pyrometer, bool):
        read.fault("shop.heat.pyrometer", pyrometer, "true or false")
        pyrometer = False
    return Heat(
        kind,
        read.number(section, "accuracy_C", "shop.heat.accuracy_C", 0, 150, "°C"),
        read.number(section, "max_C", "shop.heat.max_C", 200, 1700, "°C"),
        read.word(section, "atmosphere", "shop.heat.atmosphere", words.ATMOSPHERES, "air"),
        pyrometer,
    )


def _baths(read, shop):
    typed = shop.get("baths")
    if not isinstance(typed, (list, tuple)) or not typed:
        read.fault("shop.baths", typed if typed else None, "a list with at least one bath")
        return ()
    if len(typed) > 12:
        read.fault("shop.baths", f"{len(typed)} baths", "at most 12 baths")
        typed = typed[:12]
    baths = []
    for i, entry in enumerate(typed):
        path = f"shop.baths[{i}]"
        if not isinstance(entry, dict):
            read.fault(path, entry, "an object with medium, volume_L, temperature_C, agitation")
            continue
        medium = entry.get("medium")
        row = words.find_row("media", medium) if isinstance(medium, str) and medium else None
        if row is None:
            read.fault(f"{path}.medium", medium or None, "one of " + ", ".join(r["id"] for r in table("media")))
        volume = read.number(entry, "volume_L", f"{path}.volume_L", 0.1, 100000, "L")
        temperature = read.number(entry, "temperature_C", f"{path}.temperature_C", -20, 400, "°C")
        agitation = read.word(entry, "agitation", f"{path}.agitation", words.AGITATIONS, "still")
        if row is None:
            continue
        if temperature is None:
            temperature = words.default_bath_C(row)
        _check_bath(read, path, row, temperature)
        baths.append(Bath(row["id"], volume if words.is_liquid(row) else None, temperature, agitation))
    return tuple(baths)


def _check_bath(read, path, row, temperature_C):
    """A bath must be liquid: below the boil of water, below the flash point of its oil."""
    flash = number(row["flash_C"])
    if flash is not None and temperature_C >= flash:
        read.fault(
            f"{path}.temperature_C",
            temperature_C,
            f"below the flash point of {row['name']}, about {flash:g} °C; "
            f"at most {flash - 28:.0f} °C to keep the margin",
        )
    if row["kind"] == "water" and not -10 <= temperature_C <= 95:
        read.fault(f"{path}.temperature_C", temperature_C, "from -10 to 95 °C for a water bath")


def _temper(read, shop):
    section = read.section(shop, "temper", "shop.temper")
    kind = (
        read.word(section, "kind", "shop.temper.kind", words.TEMPERS) if isinstance(shop.get("temper"), dict) else None
    )
    largest = read.number(
        section,
        "max_C",
        "shop.temper.max_C",
        LOWEST_TEMPER_C,
        1300,
        "°C (an oven that cannot reach 100 °C tempers nothing)",
    )
    if largest is None and kind:
        largest = next(number(row["max_default_C"]) for row in table("temper_ovens") if row["kind"] == kind)
    return TemperOven(kind, largest, read.number(section, "accuracy_C", "shop.temper.accuracy_C", 0, 100, "°C"))


def _decided(read, data):
    section = data.get("decided")
    if section in (None, {}):
        return {}
    if not isinstance(section, dict):
        read.fault("decided", section, "an object with austenitize_C, medium, temper_C, temper_hold_min, temper_cycles")
        return {}
    limits = {
        "austenitize_C": (650, 1300, "°C", False),
        "temper_C": (80, 750, "°C", False),
        "temper_hold_min": (1, 6000, "min", False),
        "temper_cycles": (1, 6, "", True),
    }
    found = {}
    for name in section:
        if name == "medium":
            row = words.find_row("media", section[name]) if isinstance(section[name], str) else None
            if row is None:
                read.fault("decided.medium", section[name], "one of " + ", ".join(r["id"] for r in table("media")))
            else:
                found[name] = row["id"]
        elif name in limits:
            low, high, unit, whole = limits[name]
            value = read.number(section, name, f"decided.{name}", low, high, unit, whole=whole)
            if value is not None:
                found[name] = value
        else:
            read.fault(f"decided.{str(name)[:30]}", section[name], "one of medium, " + ", ".join(limits))
    return found


def _check_heat_reaches(read, grade, heat):
    """A fire that cannot reach the steel's hardening range hardens nothing: that is a fault, not a plan."""
    if not grade or heat.max_C is None:
        return
    for row in table("temperatures"):
        if row["grade"] == grade and row["quantity"] == "austenitize_C" and heat.max_C < float(row["low"]):
            read.fault(
                "shop.heat.max_C", heat.max_C, f"at least {float(row['low']):g} °C, where {grade} begins to harden"
            )
