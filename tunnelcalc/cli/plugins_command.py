"""`tunnelcalc plugins`: what is registered, by whom, with parameters, units and ranges."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path

from tunnelcalc.errors import ExitCode
from tunnelcalc.pipeline.flags_stage import screening_lines
from tunnelcalc.plugin.parameter import Parameter
from tunnelcalc.plugin.registry import SORTS, Offer, load_plugins
from tunnelcalc.validity import FlagSettings


def plugins(plugin_files: Sequence[Path] = ()) -> ExitCode:
    """List every offer by sort, and every plugin that could not be used."""
    registry = load_plugins(files=plugin_files)
    for sort in SORTS:
        if sort == "verification_check":
            continue  # `tunnelcalc verification` lists them, with their numbers
        print(f"{sort}")
        for offer in registry.of_sort(sort):
            print(f"  {offer.name}  from {offer.source}")
            for line in _details(offer):
                print(f"      {line}")
    for (sort, name), claimants in sorted(registry.disputed.items()):
        print(f"disputed: {sort} {name} is offered by {' and '.join(sorted(claimants))}: not used")
    for failure in registry.failures:
        print(f"failed: {failure}")
    return ExitCode.COMPLETE


def _details(offer: Offer) -> list[str]:
    thing = offer.thing
    if offer.sort == "support_kind":
        return [thing.meaning] + [
            f"{parameter.name}: {parameter.meaning}; {parameter.allowed()}" + _condition(parameter)
            for parameter in thing.parameters
        ]
    if offer.sort == "support_check":
        load = "load check" if thing.carries_load else "rule"
        unit = f", in {thing.unit}" if thing.unit else ""
        return [f"{thing.meaning}", f"{load} for {', '.join(thing.applies_to)}{unit}"]
    if offer.sort == "class_check":
        sort = "load check" if thing.carries_load else "rule"
        choice = f", counts where criteria: {thing.name}: yes" if thing.by_choice else ""
        return [
            thing.meaning,
            f"{sort} of a class, in {thing.unit}{choice}",
            *(
                f"{option.name}: {option.meaning}; {option.allowed()}"
                for option in getattr(thing, "options", ())
            ),
        ]
    if offer.sort == "validity_flag":
        (line,) = screening_lines((thing,), FlagSettings())
        return [line.meaning, f"{line.quantity}: {line.threshold} ({line.origin})"]
    if offer.sort == "ground_reader":
        return [f"files ending in {', '.join(thing.suffixes)}"]
    if offer.sort in ("report_writer", "section_figure", "trade_off_figure"):
        return []
    return [thing.source]


def _condition(parameter: Parameter) -> str:
    """When a parameter is asked for, and what is meant where it is not stated."""
    text = ""
    if parameter.only_if is not None:
        key, words = parameter.only_if
        text += f"; only if {key} is {' or '.join(words)}"
    return text + (f"; without it {parameter.default}" if parameter.default else "")
