"""What one distribution offers, beside what tunnelcalc itself offers and nothing else."""

from __future__ import annotations

from dataclasses import dataclass
from importlib.metadata import entry_points
from pathlib import Path
from typing import Any

from tunnelcalc.plugin.contract import ClassCheck, SupportCheck, SupportKind
from tunnelcalc.plugin.hooks import ENTRY_POINT_GROUP
from tunnelcalc.plugin.registry import OWN_DISTRIBUTION, Registry, load_plugins
from tunnelcalc.project import Element


@dataclass(frozen=True, slots=True)
class Offers:
    """Kinds and checks of a distribution, and the registry that holds them and tunnelcalc's."""

    registry: Registry
    plugins: frozenset[str]

    @property
    def kinds(self) -> tuple[SupportKind, ...]:
        return self._of_sort("support_kind")

    @property
    def checks(self) -> tuple[SupportCheck, ...]:
        return self._of_sort("support_check")

    @property
    def class_checks(self) -> tuple[ClassCheck, ...]:
        return self._of_sort("class_check")

    def checks_of(self, element: Element) -> tuple[SupportCheck, ...]:
        """Checks of an element in a project that names the distribution's plugins."""
        return tuple(self.registry.checks_for(element, self.plugins))

    def _of_sort(self, sort: str) -> tuple[Any, ...]:
        offers = self.registry.of_sort(sort)
        return tuple(offer.thing for offer in offers if offer.source.plugin in self.plugins)


def offers_of(distribution: str) -> Offers:
    """What an installed distribution offers.

    Raises AssertionError where it has no plugin, or one of its plugins cannot be used.
    """
    wanted = {_normal(distribution), OWN_DISTRIBUTION}
    found = entry_points(group=ENTRY_POINT_GROUP)
    points = [p for p in found if p.dist is not None and _normal(p.dist.name) in wanted]
    registry = load_plugins(points)
    faults = [str(f) for f in registry.failures if _is(f.source.distribution, distribution)]
    if faults:
        raise AssertionError("; ".join(faults))
    names = {s.plugin for s in registry.sources if _is(s.distribution, distribution)}
    if not names:
        raise AssertionError(
            f"{distribution} is not installed, or names no plugin under the entry-point group "
            f"{ENTRY_POINT_GROUP!r}"
        )
    return Offers(registry, frozenset(names))


def offers_of_file(path: Path) -> Offers:
    """What a plugin file offers that a user would name with `--plugin-file`.

    Raises `InputError` where it cannot be used.
    """
    found = entry_points(group=ENTRY_POINT_GROUP)
    own = [p for p in found if p.dist is not None and p.dist.name == OWN_DISTRIBUTION]
    return Offers(load_plugins(own, files=(path,)), frozenset({path.stem}))


def _is(one: str, other: str) -> bool:
    return _normal(one) == _normal(other)


def _normal(name: str) -> str:
    """Names of distributions are the same in any case, and with -, _ or a dot."""
    return name.lower().replace("_", "-").replace(".", "-")
