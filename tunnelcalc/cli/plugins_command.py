"""`tunnelcalc plugins`: what is registered, by whom, with parameters, units and ranges."""

from __future__ import annotations

from tunnelcalc.errors import ExitCode
from tunnelcalc.pipeline.flags_stage import screening_lines
from tunnelcalc.plugin.registry import SORTS, Offer, load_plugins
from tunnelcalc.validity import FlagSettings


def plugins() -> ExitCode:
    """List every offer by sort, and every plugin that could not be used."""
    registry = load_plugins()
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
            f"{parameter.name}: {parameter.meaning}; {parameter.allowed()}"
            + (f"; only if {' is '.join(parameter.only_if)}" if parameter.only_if else "")
            for parameter in thing.parameters
        ]
    if offer.sort == "support_check":
        load = "load check" if thing.carries_load else "rule"
        unit = f", in {thing.unit}" if thing.unit else ""
        return [f"{thing.meaning}", f"{load} for {', '.join(thing.applies_to)}{unit}"]
    if offer.sort == "class_check":
        sort = "load check" if thing.carries_load else "rule"
        choice = f", counts where criteria: {thing.name}: yes" if thing.by_choice else ""
        return [thing.meaning, f"{sort} of a class, in {thing.unit}{choice}"]
    if offer.sort == "validity_flag":
        (line,) = screening_lines((thing,), FlagSettings())
        return [line.meaning, f"{line.quantity}: {line.threshold} ({line.origin})"]
    if offer.sort == "ground_reader":
        return [f"files ending in {', '.join(thing.suffixes)}"]
    if offer.sort in ("report_writer", "section_figure"):
        return []
    return [thing.source]
