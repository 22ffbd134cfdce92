"""The command ``check``: what a study would solve, in a few lines."""

from __future__ import annotations

from collections.abc import Mapping
from pathlib import Path
from typing import Any

from membrane.cli.check_sweep import sweep_lines
from membrane.plugins.options import plain, unit_of
from membrane.records.function import Amount, Function
from membrane.records.plan import Plan
from membrane.records.study import (
    Along,
    Edge,
    EdgePart,
    LineLoad,
    ModesWanted,
    Patch,
    Shape,
    Study,
    Support,
)
from membrane.study import read_study
from membrane.varying import KINDS, is_varying


def describe_study(file: Path) -> str:
    """The lines that ``membrane check`` prints.

    The outline is drawn and cut, but not meshed, unless there is a sweep, of which one point
    is timed. Raises StudyError, or OutlineError for shapes that do not fit together.
    """
    study = read_study(file)
    from membrane.pipeline import plan

    planned = plan(study)
    parts = (
        *(_shapes(study), _physics(study), _wanted(study), _size(planned)),
        sweep_lines(study),
    )
    pairs = [pair for pairs in parts for pair in pairs]
    width = max(len(label) for label, _ in pairs)
    return "\n".join(f"{label:<{width}}  {text}" for label, text in pairs)


def _size(planned: Plan) -> list[tuple[str, str]]:
    work = f"about {planned.unknowns} unknowns of degree {planned.degree} at the first try"
    notes = [("note", note) for note in planned.notes]
    return [("area", f"{planned.area:.6g} m^2"), ("mesh", work), *notes]


def _shapes(study: Study) -> list[tuple[str, str]]:
    sources = study.source.get("patches", [])
    pairs = zip(study.patches, sources, strict=True)
    patches = [(f"patch {patch.name}", _patch(patch, source)) for patch, source in pairs]
    holes = [(f"hole {hole.name}", _shape(hole.shape)) for hole in study.holes]
    loads = [(f"line load {load.name}", _load(load)) for load in study.line_loads]
    slits = [(f"slit {slit.name}", _shape(slit.line)) for slit in study.slits]
    parts = [(f"edge part {part.name}", _part(part)) for part in study.edge_parts]
    title = [("title", study.title)] if study.title else []
    outline = ("outline", _shape(study.outline))
    return [*title, outline, *patches, *holes, *loads, *slits, *parts]


def _physics(study: Study) -> list[tuple[str, str]]:
    head = study.head
    bed = f", bedding {_amount(head.bedding, 'N/m^3')}" if head.bedding else ""
    density = _amount(head.areal_density, "kg/m^2")
    text = f"areal density {density}, {_tension(study.source['head'])}{bed}"
    terms = [(f"term {name}", _options(options)) for name, options in study.terms.items()]
    edges = [(f"edge {name}", _edge(edge)) for name, edge in study.edges.items()]
    return [("head", text), *terms, *edges]


def _wanted(study: Study) -> list[tuple[str, str]]:
    products = ", ".join(study.products.write) or "the summary only"
    return [("modes", _modes(study.modes)), ("products", products)]


def _shape(shape: Shape) -> str:
    x, y = shape.at
    at = f", at ({x:g}, {y:g}) m" if shape.at != (0.0, 0.0) else ""
    turned = f", turned by {shape.rotate:g} rad" if shape.rotate else ""
    return f"{shape.plugin}: {_options(shape.options)}{at}{turned}"


def _options(options: object) -> str:
    pairs = [pair for pair in plain(options).items() if pair[1] not in ([], "")]
    worded = (f"{key} {_value(value)} {unit_of(options, key)}".rstrip() for key, value in pairs)
    return ", ".join(worded) or "no options"


def _value(value: object) -> str:
    if isinstance(value, list):
        return f"[{', '.join(_value(item) for item in value)}]"
    return f"{value:g}" if isinstance(value, float) else str(value)


def _patch(patch: Patch, source: Mapping[str, Any]) -> str:
    parts = [
        _named("areal density", patch.areal_density, "kg/m^2"),
        _named("added density", patch.added_density, "kg/m^2"),
        patch.tension is not None and _tension(source),
        _named("bedding", patch.bedding, "N/m^3"),
    ]
    return "; ".join([_shape(patch.shape), *(part for part in parts if part)])


def _load(load: LineLoad) -> str:
    parts = [
        _named("line density", load.density or None, "kg/m"),
        _named("line stiffness", load.stiffness or None, "N/m^2"),
    ]
    return "; ".join([_shape(load.line), *(part for part in parts if part)])


def _part(part: EdgePart) -> str:
    if part.along is Along.CURVES:
        return f"curves {part.start + 1:g} to {part.stop:g} of {part.edge}"
    unit = "rad" if part.along is Along.ANGLE else "m"
    times = f", {part.repeat} times" if part.repeat > 1 else ""
    return f"{part.start:g} to {part.stop:g} {unit} of {part.edge}{times}"


def _tension(source: Mapping[str, Any]) -> str:
    tension = source["tension"]
    if not isinstance(tension, Mapping) or is_varying(tension):
        return f"tension {_amount(tension, 'N/m')}"
    units = {"angle": "rad"}
    parts = (f"{key} {_amount(n, units.get(key, 'N/m'))}" for key, n in tension.items())
    return f"tension {', '.join(parts)}"


def _named(name: str, amount: Amount | None, unit: str) -> str:
    return "" if amount is None else f"{name} {_amount(amount, unit)}"


def _amount(amount: Amount | Mapping[str, Any], unit: str) -> str:
    """A number with its unit, or how a coefficient that varies over the head is given."""
    source = amount.source if isinstance(amount, Function) else amount
    if not isinstance(source, Mapping):
        return f"{source:g} {unit}"
    kind = next(kind for kind in KINDS if kind in source)
    of = f" of {source['script']}" if "script" in source else ""
    return f"by the {kind} {source[kind]}{of} in {source.get('unit', unit)}"


def _edge(edge: Edge) -> str:
    elastic = edge.support is Support.ELASTIC
    stiffness = f", {_amount(edge.stiffness, 'N/m^2')}" if elastic else ""
    a_mass = "a mass " if isinstance(edge.mass, Function) else ""
    mass = f", with {a_mass}{_amount(edge.mass, 'kg/m')}" if edge.mass else ""
    return f"{edge.support}{stiffness}{mass}"


def _modes(modes: ModesWanted) -> str:
    which = f"{modes.count} lowest" if modes.up_to is None else f"all up to {modes.up_to:g} Hz"
    degree = f", degree {modes.degree}" if modes.degree else ""
    return f"{which}, to {modes.accuracy:g} cent, by {modes.eigensolver}{degree}"
