"""Reads a project folder into a checked project, or tells every problem at once."""

from __future__ import annotations

from collections.abc import Mapping, Sequence
from pathlib import Path

from tunnelcalc.errors import InputError, Problem, Problems, Where
from tunnelcalc.inputs.files import PROJECT_FILE, ProjectFolder
from tunnelcalc.inputs.flag_settings import check_overrides, read_flag_settings
from tunnelcalc.inputs.ground import Ground, Opening, read_ground
from tunnelcalc.inputs.level_tables import read_tunnel_level
from tunnelcalc.inputs.method_choices import read_methods
from tunnelcalc.inputs.notation import read_notation
from tunnelcalc.inputs.opening import read_profiles
from tunnelcalc.inputs.support_classes import idle_values, parameter_value, read_support_classes
from tunnelcalc.inputs.values import Reader
from tunnelcalc.inputs.word_tables import WordTables, added_words, idle_tables, read_word_tables
from tunnelcalc.inputs.yaml_tree import Table, parse
from tunnelcalc.outputs.run_folder import INPUTS, MANIFEST
from tunnelcalc.plugin.contract import ClassCheck, ClassCheckWithOptions
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import Criteria, Project, ScheduleRules, SupportClass
from tunnelcalc.text import decoded, quoted, suggestion
from tunnelcalc.vocabulary import Limits

YES_OR_NO = ("yes", "no", "true", "false")
"""Some editors and programs write yes as true."""
TRUE = ("yes", "true")


INSTALL_IT = "install it, name its file with --plugin-file, or remove the entry"


def read_project(path: Path, registry: Registry) -> Project:
    """Read and check a project.

    `path` is the project's folder, or the project file in it. Raises `InputError` with every
    problem that was found in any of its files.
    """
    problems = Problems()
    folder = ProjectFolder(project_folder(path), problems)
    file = folder.read(PROJECT_FILE, Where(PROJECT_FILE), "the project")
    problems.raise_if_any()
    assert file is not None
    text = decoded(file.path, file.content, problems)
    tree = None if text is None else parse(file.path, text, problems)
    if tree is not None and not isinstance(tree, Table):
        problems.add(
            tree.where,
            "holds no keys",
            allowed="keys with values: title, opening, ground, ...",
            fix="write the project as keys with values",
        )
    if not isinstance(tree, Table):
        problems.raise_if_any()
        raise AssertionError("a file that gives no keys must be a problem")
    return _read(Reader(tree, problems), folder, registry)


def project_folder(path: Path) -> Path:
    """The folder of a project that is named by itself or by its project file."""
    folder = path.parent if path.name == PROJECT_FILE and path.is_file() else path
    if (folder / PROJECT_FILE).is_file():
        return folder
    fix = f"name a folder that holds {PROJECT_FILE}"
    if folder.is_dir():
        what = f"holds no file {PROJECT_FILE}"
        if (folder / MANIFEST).is_file():
            what = f"{what}: it is the folder of a run"
            fix = (
                f"name {folder / INPUTS}, the project as that run kept it; for a command that "
                "writes, with --out outside of it"
            )
    else:
        what = "is not a folder" if folder.exists() else "does not exist"
    raise InputError((Problem(Where(str(path)), what, fix),))


def _read(reader: Reader, folder: ProjectFolder, registry: Registry) -> Project:
    problems = reader.problems
    title = reader.text("title")
    reader.notation = read_notation(reader)
    opening = _opening(reader, folder, registry)
    methods = read_methods(reader, registry)
    plugins = _plugins(reader, registry)
    of_classes = registry.class_checks(plugins)
    criteria = _criteria(reader, of_classes)
    ground_reader = reader.table_of("ground")
    ground = None
    if ground_reader is not None and opening is not None:
        demands = class_demands(of_classes, criteria)
        ground = read_ground(ground_reader, opening, folder, registry, methods, demands)
    radius = min((p.radius_m for p in opening.profiles), default=None) if opening else None
    tables = read_word_tables(reader, folder, registry)
    classes = read_support_classes(reader, registry, plugins, radius, tables)
    schedule = _schedule(reader)
    flags = read_flag_settings(reader, registry.flags(plugins))
    if ground is not None:
        check_overrides(flags, ground.sections, reader)
    reader.finish()
    # The project file before the tables that it names.
    rank = {file: number for number, file in enumerate(folder.files)}
    problems.found.sort(key=lambda problem: rank.get(problem.where.file, len(rank)))
    problems.raise_if_any()
    assert title is not None
    assert methods is not None
    assert ground is not None
    assert criteria is not None
    assert schedule is not None
    return Project(
        title=title,
        methods=methods.choices,
        support_classes=classes,
        criteria=criteria,
        schedule=schedule,
        plugins=plugins,
        gaps=ground.gaps,
        ground=ground.sections,
        ground_columns=ground.columns,
        origins=ground.origins,
        tests=ground.tests,
        notation=reader.notation,
        drainage=ground.drainage,
        warnings=_warnings(ground, classes, tables, registry),
        files=tuple(sorted(folder.files.values(), key=lambda file: file.path)),
        flags=flags.settings,
        words=added_words(tables),
    )


def _opening(reader: Reader, folder: ProjectFolder, registry: Registry) -> Opening | None:
    """One profile, or a list of profiles, here or under `profiles`; the tunnel's level."""
    if reader.is_list("opening"):
        return Opening(read_profiles(reader, "opening"), None, False, reader)
    opening = reader.table_of("opening")
    if opening is None:
        return None
    has_axis = opening.has("axis")
    level = read_tunnel_level(opening, folder, registry)
    profiles = read_profiles(opening, "profiles")
    opening.finish()
    return Opening(profiles, level, has_axis, opening)


def _plugins(reader: Reader, registry: Registry) -> tuple[str, ...]:
    known = [source.plugin for source in registry.sources]
    named = []
    for where, text in reader.texts_of("plugins"):
        if text in known:
            named.append(text)
            continue
        failed = [str(f) for f in registry.failures if f.source.plugin == text]
        hint = suggestion(text, known)
        other = f'did you mean "{hint}"?' if hint else INSTALL_IT
        reader.problems.add(
            where,
            f"names {quoted(text)}, a plugin that is not there",
            name='key "plugins"',
            allowed=", ".join(known),
            fix=failed[0] if failed else other,
        )
    return tuple(dict.fromkeys(named))


def _criteria(reader: Reader, of_classes: Sequence[ClassCheck]) -> Criteria | None:
    table = reader.table_of("criteria")
    if table is None:
        return None
    factor = table.number("factor_of_safety", Limits(1, 10))
    closure = table.number("closure_pct", Limits(0, 100, above=True), "%")
    said = {
        check.name: table.choice(check.name, YES_OR_NO, required=False)
        for check in of_classes
        if check.by_choice
    }
    chosen = {name: word in TRUE for name, word in said.items() if word is not None}
    options = _options(table, of_classes, chosen)
    table.finish()
    if factor is None or closure is None:
        return None
    return Criteria(factor, closure, chosen, options)


def _options(
    table: Reader, of_classes: Sequence[ClassCheck], chosen: Mapping[str, bool]
) -> dict[str, float | str]:
    """The options of the checks that are chosen; of the others they have no use."""
    found: dict[str, float | str] = {}
    for check in of_classes:
        if not isinstance(check, ClassCheckWithOptions):
            continue
        for option in check.options:
            if chosen.get(check.name, False):
                value = parameter_value(table, option)
                found |= {} if value is None else {option.name: value}
                continue
            if table.has(option.name):
                fix = f"remove it, or write {check.name}: yes"
                table.complain(option.name, f"has no use without {check.name}", fix=fix)
            table.known[option.name] = None
    return found


def class_demands(
    of_classes: Sequence[ClassCheck], criteria: Criteria | None
) -> list[tuple[str, Limits, str]]:
    """Ground columns that checks of a class need on every section, and the checks' names."""
    chosen = {} if criteria is None else criteria.chosen_checks
    return [
        (column, limits, check.name)
        for check in of_classes
        if chosen.get(check.name, not check.by_choice)
        for column, limits in check.requires.items()
    ]


def _schedule(reader: Reader) -> ScheduleRules | None:
    table = reader.table_of("schedule")
    if table is None:
        return None
    minimum = table.number("minimum_zone_m", Limits(0, 1e5), "m")
    carry = table.number("carry_m", Limits(0, 1e5), "m")
    table.finish()
    return None if minimum is None or carry is None else ScheduleRules(minimum, carry)


def _warnings(
    ground: Ground, classes: Sequence[SupportClass], tables: WordTables, registry: Registry
) -> tuple[str, ...]:
    return (
        *ground.warnings,
        *idle_values(classes, registry),
        *idle_tables(tables),
        *(str(failure) for failure in registry.failures),
    )
