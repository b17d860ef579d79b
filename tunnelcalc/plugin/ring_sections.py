"""Gives an element the section that its kind knows of, so that checks of a class find it."""

from __future__ import annotations

from dataclasses import replace

from tunnelcalc.plugin.contract import RingKind, SupportKind
from tunnelcalc.plugin.registry import describe
from tunnelcalc.project import Element
from tunnelcalc.support.ring_section import RingSection


def with_section(kind: SupportKind, element: Element) -> Element:
    """The element with the section of its ring; a ring of which none is known acts alone."""
    if isinstance(kind, RingKind):
        try:
            return replace(element, section=kind.ring_section(element))
        except (Exception, SystemExit) as error:  # a stranger's kind may raise anything
            return replace(element, section=RingSection(acts_alone=describe(error)))
    if getattr(kind, "is_ring", False):
        unknown = RingSection(acts_alone=f"the plugin of {kind.name} tells no section")
        return replace(element, section=unknown)
    return element
