"""How the classes of tests get their cases: one for each thing that is offered."""

from __future__ import annotations

from collections.abc import Sequence
from typing import ClassVar

import pytest

from tunnelcalc.plugin.contract import SupportKind
from tunnelcalc.project import Element
from tunnelcalc.testing.elements import elements_of
from tunnelcalc.testing.offers import Offers
from tunnelcalc.testing.sections import SMALLEST_RADIUS_M


class Generated:
    """Tests of what a distribution offers: subclass, and state `offers`."""

    offers: ClassVar[Offers]
    elements: ClassVar[tuple[Element, ...]] = ()
    """Elements of your own, instead of those that are made from the parameters of their kinds."""

    def elements_of(self, kind: SupportKind) -> list[Element]:
        """The elements by which a kind is tried."""
        own = [element for element in self.elements if element.kind == kind.name]
        return own or elements_of(kind, SMALLEST_RADIUS_M)


def put(
    metafunc: pytest.Metafunc, names: str, cases: Sequence[tuple[tuple[object, ...], str]]
) -> None:
    """Make a test for each case: its arguments, and what it is called."""
    if set(names.split(",")) <= set(metafunc.fixturenames):
        values = [pytest.param(*arguments, id=called) for arguments, called in cases]
        metafunc.parametrize(names, values)


def called(*parts: str, element: Element | None = None) -> str:
    """The name of a case."""
    words = [] if element is None else [v for v in element.values.values() if isinstance(v, str)]
    return "-".join([*parts, *words])
