"""Loads plugins, each by itself, and keeps what they offer by sort and name."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass, field, replace
from importlib.metadata import EntryPoint, entry_points
from pathlib import Path
from typing import Any, cast

import pluggy

from tunnelcalc.errors import DuplicateNameError, InputError
from tunnelcalc.plugin import hooks
from tunnelcalc.plugin.contract import (
    ClassCheck,
    GroundReader,
    ReportWriter,
    SectionFigure,
    SupportCheck,
    SupportKind,
    TradeOffFigure,
    ValidityFlag,
)
from tunnelcalc.plugin.files import HashedFile, files_of, load_file, refusal
from tunnelcalc.plugin.method_contract import Method
from tunnelcalc.project import Element
from tunnelcalc.verification import VerificationCheck

OWN_DISTRIBUTION = "tunnelcalc"

SORTS = {
    "support_kind": "tunnelcalc_register_support_kinds",
    "support_check": "tunnelcalc_register_support_checks",
    "class_check": "tunnelcalc_register_class_checks",
    "strength": "tunnelcalc_register_strengths",
    "deformation_modulus": "tunnelcalc_register_deformation_moduli",
    "ground_reaction": "tunnelcalc_register_ground_reactions",
    "closure_profile": "tunnelcalc_register_closure_profiles",
    "validity_flag": "tunnelcalc_register_validity_flags",
    "verification_check": "tunnelcalc_register_verification_checks",
    "ground_reader": "tunnelcalc_register_ground_readers",
    "report_writer": "tunnelcalc_register_report_writers",
    "section_figure": "tunnelcalc_register_section_figures",
    "trade_off_figure": "tunnelcalc_register_trade_off_figures",
}
"""Each sort of thing that plugins offer, and the hook that offers it."""


@dataclass(frozen=True, slots=True)
class PluginSource:
    """Where a plugin comes from: its entry-point name, distribution and version.

    A plugin that was named as a file has no distribution and no version. `files` are those of its
    module as they were when it was loaded.
    """

    plugin: str
    distribution: str
    version: str
    plugin_file: str = ""
    files: tuple[HashedFile, ...] = ()

    def __str__(self) -> str:
        if self.plugin_file:
            return f"{self.plugin} (file {self.plugin_file})"
        return f"{self.plugin} ({self.distribution} {self.version})"


@dataclass(frozen=True, slots=True)
class Offer:
    """One thing that a plugin offers."""

    sort: str
    name: str
    thing: Any
    source: PluginSource


@dataclass(frozen=True, slots=True)
class LoadFailure:
    """A plugin that is of no use in this process, why, and what to do."""

    source: PluginSource
    cause: str
    remedy: str

    def __str__(self) -> str:
        return f"plugin {self.source} could not be used: {self.cause}; {self.remedy}"


@dataclass(slots=True)
class Registry:
    """What plugins offer. Lookups never depend on the order in which plugins were loaded."""

    offers: dict[tuple[str, str], Offer] = field(default_factory=dict)
    disputed: dict[tuple[str, str], set[str]] = field(default_factory=dict)
    """Names that two plugins claim: neither is used."""
    failures: list[LoadFailure] = field(default_factory=list)
    sources: list[PluginSource] = field(default_factory=list)

    def add(self, offer: Offer) -> None:
        """Raises DuplicateNameError where another plugin offers the same sort and name."""
        key = (offer.sort, offer.name)
        present = self.offers.get(key)
        if present is None and key not in self.disputed:
            self.offers[key] = offer
            return
        claimants = self.disputed.setdefault(key, set())
        claimants.add(offer.source.plugin)
        if present is not None:
            claimants.add(present.source.plugin)
            del self.offers[key]
        raise DuplicateNameError(
            f"plugins {' and '.join(sorted(claimants))} both offer the {offer.sort} {offer.name!r}"
        )

    def remove_plugin(self, plugin: str) -> None:
        """Forget all that a plugin offered."""
        self.offers = {k: o for k, o in self.offers.items() if o.source.plugin != plugin}
        self.sources = [source for source in self.sources if source.plugin != plugin]

    def of_sort(self, sort: str) -> Iterator[Offer]:
        """Offers of one sort, by name."""
        return iter(
            sorted((o for o in self.offers.values() if o.sort == sort), key=lambda o: o.name)
        )

    def names(self, sort: str) -> tuple[str, ...]:
        return tuple(offer.name for offer in self.of_sort(sort))

    def find(self, sort: str, name: str) -> Any | None:
        offer = self.offers.get((sort, name))
        return None if offer is None else offer.thing

    def support_kind(self, name: str) -> SupportKind:
        return cast("SupportKind", self.offers["support_kind", name].thing)

    def method(self, step: str, name: str) -> Method:
        return cast("Method", self.offers[step, name].thing)

    def ground_reader(self, suffix: str) -> GroundReader | None:
        """The reader of a file ending. What we read ourselves, no other plugin takes over."""
        offers = self.of_sort("ground_reader")
        for offer in sorted(offers, key=lambda o: o.source.distribution != OWN_DISTRIBUTION):
            if suffix.lower() in offer.thing.suffixes:
                return cast("GroundReader", offer.thing)
        return None

    def checks_for(self, element: Element, named: Iterable[str]) -> Iterator[SupportCheck]:
        """Checks of an element, by name: its kind's own plugin's and those of named plugins."""
        kind = self.offers["support_kind", element.kind]
        plugins = {kind.source.plugin, *named}
        for offer in self.of_sort("support_check"):
            if offer.source.plugin not in plugins or element.kind not in offer.thing.applies_to:
                continue
            if offer.thing.concerns(element):
                yield cast("SupportCheck", offer.thing)

    def class_checks(self, named: Iterable[str]) -> tuple[ClassCheck, ...]:
        return tuple(offer.thing for offer in self._taking_part("class_check", named))

    def flags(self, named: Iterable[str]) -> tuple[ValidityFlag, ...]:
        return tuple(offer.thing for offer in self._taking_part("validity_flag", named))

    def verification_checks(self) -> tuple[VerificationCheck, ...]:
        return tuple(offer.thing for offer in self.of_sort("verification_check"))

    def report_writers(self, named: Iterable[str]) -> tuple[ReportWriter, ...]:
        return tuple(offer.thing for offer in self._taking_part("report_writer", named))

    def section_figures(self, named: Iterable[str]) -> tuple[SectionFigure, ...]:
        return tuple(offer.thing for offer in self._taking_part("section_figure", named))

    def trade_off_figures(self, named: Iterable[str]) -> tuple[TradeOffFigure, ...]:
        return tuple(offer.thing for offer in self._taking_part("trade_off_figure", named))

    def _taking_part(self, sort: str, named: Iterable[str]) -> Iterator[Offer]:
        """What runs follows from the project, not from what else happens to be installed."""
        chosen = set(named)
        for offer in self.of_sort(sort):
            own = offer.source.distribution == OWN_DISTRIBUTION
            if own or offer.source.plugin in chosen:
                yield offer


def load_plugins(
    points: Iterable[EntryPoint] | None = None, *, files: Iterable[Path] = ()
) -> Registry:
    """Load every installed plugin, or those of the given entry points; then the named files.

    An installed plugin that fails to load, misspells a hook or claims a taken name is reported in
    `failures` and leaves the others unharmed. A file was asked for: where it cannot be used,
    `InputError` is raised. No file is loaded that `files` does not name.
    """
    registry = Registry()
    manager = pluggy.PluginManager("tunnelcalc")
    manager.add_hookspecs(hooks)
    found = entry_points(group=hooks.ENTRY_POINT_GROUP) if points is None else points
    sourced = sorted(((_source(point), point) for point in found), key=lambda pair: str(pair[0]))
    for source, point in sourced:
        claimants = [str(other) for other, _ in sourced if other.plugin == source.plugin]
        if len(claimants) > 1:
            cause = f"its name is claimed by {' and '.join(claimants)}"
            registry.failures.append(LoadFailure(source, cause, "uninstall all but one of them"))
            continue
        try:
            module = point.load()
            source = replace(source, files=files_of(module))
        except (Exception, SystemExit) as error:  # a stranger's module may raise anything
            remedy = "reinstall or remove the distribution, or install what it misses"
            registry.failures.append(LoadFailure(source, describe(error), remedy))
            continue
        register_plugin(registry, manager, module, source)
    for path in files:
        _load_named_file(registry, manager, path)
    return registry


def _load_named_file(registry: Registry, manager: pluggy.PluginManager, path: Path) -> None:
    """A file as a plugin named by its stem. Raises `InputError` on any fault of it."""
    taken = [str(source) for source in registry.sources if source.plugin == path.stem]
    if taken:
        raise refusal(
            path,
            f"would be a plugin named {path.stem}, as is {taken[0]}",
            "give the file another name, or leave one of the two out",
        )
    try:
        module, hashed = load_file(path)
    except InputError:
        raise
    except (Exception, SystemExit) as error:
        raise refusal(
            path, f"cannot be loaded: {describe(error)}", "mend the file, or leave it out"
        ) from error
    source = PluginSource(path.stem, "", "", str(path), (hashed,))
    told = len(registry.failures)
    register_plugin(registry, manager, module, source)
    for failure in registry.failures[told:]:
        raise refusal(path, f"cannot be used: {failure.cause}", "mend the file, or leave it out")


def _source(point: EntryPoint) -> PluginSource:
    distribution = point.dist
    if distribution is None:
        return PluginSource(point.name, "unknown", "unknown")
    return PluginSource(point.name, distribution.name, distribution.version)


def register_plugin(
    registry: Registry, manager: pluggy.PluginManager, module: object, source: PluginSource
) -> None:
    """Take in what one plugin offers; on any fault of it, nothing of it."""
    try:
        manager.register(module, name=source.plugin)
        manager.check_pending()
        registry.sources.append(source)
        others = [other for other in manager.get_plugins() if other is not module]
        for sort, hook in SORTS.items():
            caller = manager.subset_hook_caller(hook, others)
            caller(register=_registrar(registry, sort, source))
    except (Exception, SystemExit) as error:
        registry.remove_plugin(source.plugin)
        if manager.is_registered(module):
            manager.unregister(module)
        remedy = "mend or remove the plugin"
        registry.failures.append(LoadFailure(source, describe(error), remedy))


def _registrar(registry: Registry, sort: str, source: PluginSource) -> Callable[[Any], None]:
    def register(thing: Any) -> None:
        if not isinstance(thing.name, str) or not thing.name:
            raise TypeError(f"a {sort} has the name {thing.name!r}, which is no text")
        registry.add(Offer(sort, thing.name, thing, source))

    return register


def describe(error: BaseException) -> str:
    """An exception in one short line, safe to print."""
    try:
        message = " ".join(str(error).split())
    except Exception:  # a stranger's exception need not be able to speak
        message = ""
    text = f"{type(error).__name__}: {message}" if message else type(error).__name__
    return "".join(c if c.isprintable() else "?" for c in text)[:300]
