"""Blocks of a sheet on the ground: inputs, stress, strength, modulus, hazards."""

from __future__ import annotations

import math
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import replace

from tunnelcalc.calculation.formula import renamed
from tunnelcalc.calculation.line import SheetBlock, SheetLine
from tunnelcalc.calculation.symbols import SYMBOLS
from tunnelcalc.calculation.working import Working
from tunnelcalc.explain.offered import differ, last, method_lines
from tunnelcalc.explain.section import ComputedSection
from tunnelcalc.inputs.estimates import ESTIMATED, FROM_LABORATORY, Estimator, estimator_told
from tunnelcalc.pipeline.disturbed_ring_stage import OF_RING
from tunnelcalc.pipeline.ground_stages import knows_ring
from tunnelcalc.plugin.contract import SectionValues
from tunnelcalc.plugin.method_contract import STRENGTH_COLUMNS
from tunnelcalc.vocabulary import GROUND, QUANTITIES

OVERBURDEN = "Hoek & Brown, Underground Excavations in Rock (1980), ch. 5"
PRACTICE = "common practice, no source"
SQUEEZING = "Hoek & Marinos (2000), Tunnels & Tunnelling Int. 32"
SPALLING = "Martin, Kaiser & McCreath (1999), Can. Geotech. J. 36, 136-151"
DEERE = "modulus ratio: Deere (1968)"


def ground_blocks(section: ComputedSection) -> Iterator[SheetBlock]:
    """From the geometry to the hazards."""
    yield _geometry(section)
    yield _ground(section)
    yield _stress(section)
    yield _strength(section)
    yield from _ring(section)
    yield _modulus(section)
    yield _hazards(section)


def _known(values: SectionValues) -> dict[str, float]:
    """All columns that have a symbol."""
    return {
        symbol: float(values[column])
        for column, symbol in SYMBOLS.items()
        if column in values and not isinstance(values[column], str)
    }


def _geometry(section: ComputedSection) -> SheetBlock:
    values = section.values
    profile = str(values.get("profile", "")) or "circle"
    rule = "; a circle stands for it" if values.get("equivalent_radius") else ""
    source = f"project, profile {profile}{rule}"
    lines = [
        SheetLine(SYMBOLS[name], QUANTITIES[name].meaning, "", {}, float(values[name]), "m", source)
        for name in ("radius_m", "span_m")
    ]
    return SheetBlock("Geometry", tuple(lines))


def _ground(section: ComputedSection) -> SheetBlock:
    lines, absent = [], []
    relations: dict[str, Estimator] = {}
    given = section.given
    for name, quantity in GROUND.items():
        if name not in given or given[name].dtype == object:
            continue
        value = float(given[name][0])
        if math.isnan(value):
            absent += [name] if name in section.project.ground_columns else []
            continue
        word, method = _origin(section, name)
        relation = estimator_told(method) if word == ESTIMATED_WORD else None
        if relation is not None:
            relations[name] = relation
            continue
        told = f"{_WORDS.get(word, word)}{f': {method}' if method else ''}"
        if method == FROM_LABORATORY:
            told += ", laboratory.csv"
        symbol = SYMBOLS.get(name, name)
        lines.append(SheetLine(symbol, quantity.meaning, "", {}, value, quantity.unit, told))
    lines += _estimated(section, relations)
    notes = [f"ground unit: {given['ground_unit'][0]}"] if given["ground_unit"][0] else []
    if absent:
        notes.append(f"not given here: {', '.join(absent)}")
    return SheetBlock("Ground as given", tuple(lines), tuple(notes))


def _estimated(section: ComputedSection, relations: Mapping[str, Estimator]) -> Sequence[SheetLine]:
    """Quantities that follow from observations, each after what its relation needs."""
    work = Working({})
    for name in ESTIMATED:
        if name not in relations:
            continue
        relation, quantity = relations[name], GROUND[name]
        for need in relation.needs:
            work.known.setdefault(SYMBOLS[need], float(section.given[need][0]))
        value = float(section.given[name][0])
        source = f"estimated: {relation.told}"
        work.add(SYMBOLS[name], quantity.meaning, relation.formula, value, quantity.unit, source)
    return work.lines


def _origin(section: ComputedSection, quantity: str) -> tuple[str, str]:
    """Where a value came from, and by what method or from which tables."""
    place = section.chainage_m
    for origins in section.project.origins:
        if origins.quantity != quantity:
            continue
        for start, end, word, method in zip(
            origins.from_m, origins.to_m, origins.origin, origins.method, strict=True
        ):
            if start <= place <= end:
                return str(word), str(method)
    return "project", ""


ESTIMATED_WORD = "estimated"
_WORDS: Mapping[str, str] = {
    "table": "ground table",
    "unit": "units table",
    "levels": "from levels of ground, tunnel or water",
    "assumed": "assumed by the program, not given",
}


def _stress(section: ComputedSection) -> SheetBlock:
    values = section.values
    work = Working(_known(values), OVERBURDEN)
    total = float(values["vertical_stress_mpa"])
    measured = not math.isnan(float(section.given["vertical_stress_mpa"][0]))
    meaning = QUANTITIES["vertical_stress_mpa"].meaning
    formula = "" if measured else "gamma*(H + R)/1000"
    told = "measured" if measured else OVERBURDEN
    work.add(
        "sv",
        "vertical stress at the axis" if not measured else meaning,
        formula,
        total,
        "MPa",
        told,
    )
    water = float(values["water_pressure_mpa"])
    drainage = section.project.drainage or "not stated: water is left out"
    formula = "9.81*hw/1000" if water else ""
    work.add(
        "uw", f"water pressure taken off; drainage {drainage}", formula, water, "MPa", PRACTICE
    )
    vertical = float(values["effective_vertical_stress_mpa"])
    horizontal = float(values["effective_horizontal_stress_mpa"])
    work.add("sv_e", "vertical stress less water", "sv - uw", vertical, "MPa", PRACTICE)
    work.add("sh_e", "horizontal stress", "k0*sv_e", horizontal, "MPa", PRACTICE)
    mean = float(values["in_situ_stress_mpa"])
    work.add("p0", "mean in-plane stress", "sv_e*(1 + k0)/2", mean, "MPa", PRACTICE)
    larger, notes = float(values["larger_stress_mpa"]), []
    if not math.isnan(larger):
        meaning = "larger in-plane stress, with which the section is run too"
        work.add("p0_larger", meaning, "max(sv_e, sh_e)", larger, "MPa", PRACTICE)
        notes = ["k0 is outside 0.8 to 1.25: every class must be adequate under both stresses"]
    return SheetBlock("Stress in the ground", tuple(work.lines), tuple(notes))


def _strength(section: ComputedSection) -> SheetBlock:
    method = section.method(section.steps.strength)
    values = section.values
    disturbance = float(values["mass_disturbance"])
    work = Working({"D_0": float(values["disturbance"])}, PRACTICE)
    confined = disturbance != work.known["D_0"]
    meaning = "disturbance of the mass" + (": confined to a ring" if confined else "")
    work.add("D", meaning, "0" if confined else "D_0", disturbance)
    lines, notes = method_lines(section, "strength", method, values)
    return SheetBlock(f"Strength of the rock mass: {method.name}", (*work.lines, *lines), notes)


def strength_differences(section: ComputedSection) -> Iterator[str]:
    """Lines of the strength that say another number than the run computed."""
    values, method = section.values, section.method(section.steps.strength)
    lines, _ = method_lines(section, "strength", method, values)
    for column in STRENGTH_COLUMNS:
        said = last(lines, SYMBOLS[column])
        if said is not None and differ(said, float(values[column])):
            yield (
                f"strength: the line {SYMBOLS[column]} says {said!r}, the run computed "
                f"{values[column]!r}"
            )


def _ring(section: ComputedSection) -> Iterator[SheetBlock]:
    """Strength of the disturbed ring, by the same method with its own disturbance."""
    if not knows_ring(section.method(section.steps.ground_reaction)):
        return
    values = dict(section.values)
    if math.isnan(float(values["disturbed_thickness_m"])):
        return
    of_ring = {of_mass: values[ring] for ring, of_mass in OF_RING.items()}
    values |= {**of_ring, "mass_disturbance": values["disturbance"]}
    method = section.method(section.steps.strength)
    lines, notes = method_lines(section, "strength", method, values)
    names = {symbol: f"{symbol}_d" for symbol in ("mb", "s", "a")}
    kept = [
        replace(line, symbol=names[line.symbol], formula=renamed(line.formula, names))
        for line in lines
        if line.symbol in names
    ]
    given = SheetLine("D", "disturbance of the ring", "", {}, float(values["disturbance"]))
    yield SheetBlock("Strength of the disturbed ring", (given, *kept), notes)


def _modulus(section: ComputedSection) -> SheetBlock:
    values, steps = section.values, section.steps
    work = Working(_known(values), PRACTICE)
    intact, ratio = float(values["intact_modulus_mpa"]), float(values["modulus_ratio"])
    given = not math.isnan(float(section.given["intact_modulus_mpa"][0]))
    if not given and not math.isnan(ratio):
        work.add("Ei", "modulus of the intact rock", "MR*sci", intact, "MPa", DEERE)
    used = float(values["deformation_modulus_mpa"])
    method = section.method(steps.deformation_modulus)
    notes: tuple[str, ...] = ()
    if not math.isnan(float(values["rock_mass_modulus_mpa"])):
        work.add("E", "deformation modulus, measured", "Erm", used, "MPa", "measured")
    else:
        lines, notes = method_lines(section, "deformation_modulus", method, values)
        work.lines.extend(lines)
        estimate = last(lines, "E_est")
        if estimate is None:
            work.add("E", "deformation modulus", "", used, "MPa", method.source)
        else:
            work.known["E_est"] = estimate
            known = not math.isnan(intact)
            formula = "min(E_est, Ei)" if known else "E_est"
            work.add("E", "deformation modulus, not above the intact one", formula, used, "MPa")
    _add_ring_modulus(section, work)
    return SheetBlock(f"Deformation modulus: {method.name}", tuple(work.lines), notes)


def _add_ring_modulus(section: ComputedSection, work: Working) -> None:
    values = dict(section.values)
    thickness = float(values.get("disturbed_thickness_m", math.nan))
    if "ring_modulus_mpa" not in values or math.isnan(thickness):
        return
    method = section.method(section.steps.deformation_modulus)
    estimates = {}
    for symbol, disturbance in (("E_0", "mass_disturbance"), ("E_D", "disturbance")):
        own = {**values, "mass_disturbance": values[disturbance]}
        lines, _ = method_lines(section, "deformation_modulus", method, own)
        for line in lines:
            if line.symbol == "E_est":
                meaning = f"estimate with {disturbance}"
                work.lines.append(replace(line, symbol=symbol, meaning=meaning))
                estimates[symbol] = line.result
    work.known |= estimates
    lowered = len(estimates) == 2 and not math.isnan(sum(estimates.values()))
    ring = float(values["ring_modulus_mpa"])
    formula = "E*E_D/E_0" if lowered else ""
    meaning = "modulus of the ring, lowered as the relation lowers its estimate"
    work.add("E_d", meaning, formula, ring, "MPa")


def _hazards(section: ComputedSection) -> SheetBlock:
    values = section.values
    work = Working(_known(values), SQUEEZING)
    rows = (
        (
            "squeezing_strength_mpa",
            "scm_hm",
            "0.0034*mi^0.8*sci*(1.029 + 0.025*exp(-0.1*mi))^GSI",
            SQUEEZING,
        ),
        ("squeezing_strain_pct", "eps", "0.2*(p0/scm_hm)^2", SQUEEZING),
        ("face_strain_pct", "eps_face", "0.1*(scm_hm/p0)^(-1/0.54)", SQUEEZING),
        (
            "spalling_depth_m",
            "d_sp",
            "R*max(0, 1.25*(3*max(sv_e, sh_e) - min(sv_e, sh_e))/sci - 0.51)",
            SPALLING,
        ),
    )
    absent = []
    for column, symbol, formula, source in rows:
        value = float(values.get(column, math.nan))
        if math.isnan(value):
            absent.append(column)
            continue
        quantity = QUANTITIES[column]
        work.add(symbol, quantity.meaning, formula, value, quantity.unit, source)
    notes = (f"not assessed for lack of input: {', '.join(absent)}",) if absent else ()
    return SheetBlock("Hazards beside the method", tuple(work.lines), notes)
