"""Reads a project folder into a checked project, or tells every problem at once."""

from __future__ import annotations

from pathlib import Path

from tunnelcalc.errors import InputError, Problem, Problems, Where
from tunnelcalc.inputs.files import PROJECT_FILE, ProjectFolder
from tunnelcalc.inputs.ground import Ground, Opening, read_ground
from tunnelcalc.inputs.level_tables import read_tunnel_level
from tunnelcalc.inputs.notation import read_notation
from tunnelcalc.inputs.opening import read_profiles
from tunnelcalc.inputs.support_classes import read_support_classes
from tunnelcalc.inputs.values import Reader
from tunnelcalc.inputs.yaml_tree import Table, parse
from tunnelcalc.plugin.registry import Registry
from tunnelcalc.project import DEFAULT_METHODS, Criteria, Project, ScheduleRules
from tunnelcalc.text import decoded, quoted, suggestion
from tunnelcalc.vocabulary import Limits


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
    if folder.is_dir():
        what = f"holds no file {PROJECT_FILE}"
    else:
        what = "is not a folder" if folder.exists() else "does not exist"
    raise InputError((Problem(Where(str(path)), what, f"name a folder that holds {PROJECT_FILE}"),))


def _read(reader: Reader, folder: ProjectFolder, registry: Registry) -> Project:
    problems = reader.problems
    title = reader.text("title")
    reader.notation = read_notation(reader)
    opening = _opening(reader, folder, registry)
    ground_reader = reader.table_of("ground")
    ground = None
    if ground_reader is not None and opening is not None:
        ground = read_ground(ground_reader, opening, folder, registry)
    radius = min((p.radius_m for p in opening.profiles), default=None) if opening else None
    methods = _methods(reader, registry)
    plugins = _plugins(reader, registry)
    classes = read_support_classes(reader, registry, plugins, radius)
    criteria = _criteria(reader)
    schedule = _schedule(reader)
    reader.finish()
    # The project file before the tables that it names.
    rank = {file: number for number, file in enumerate(folder.files)}
    problems.found.sort(key=lambda problem: rank.get(problem.where.file, len(rank)))
    problems.raise_if_any()
    assert title is not None
    assert ground is not None
    assert criteria is not None
    assert schedule is not None
    return Project(
        title=title,
        methods=methods,
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
        warnings=_warnings(ground, registry),
        files=tuple(sorted(folder.files.values(), key=lambda file: file.path)),
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


def _methods(reader: Reader, registry: Registry) -> dict[str, str]:
    methods = dict(DEFAULT_METHODS)
    chosen = reader.table_of("methods", required=False)
    if chosen is not None:
        for step in DEFAULT_METHODS:
            name = chosen.choice(step, registry.names(step), required=False)
            if name is not None:
                methods[step] = name
        chosen.finish()
    for step, name in methods.items():
        if registry.find(step, name) is None:
            reader.problems.add(
                Where(PROJECT_FILE),
                f'"{name}" is offered by no plugin',
                name=f"the {step} method",
                allowed=" or ".join(registry.names(step)) or "none is installed",
                fix="; ".join(str(failure) for failure in registry.failures)
                or "install the plugin that offers it, or name another method",
            )
    return methods


def _plugins(reader: Reader, registry: Registry) -> tuple[str, ...]:
    known = [source.plugin for source in registry.sources]
    named = []
    for where, text in reader.texts_of("plugins"):
        if text in known:
            named.append(text)
            continue
        failed = [str(f) for f in registry.failures if f.source.plugin == text]
        hint = suggestion(text, known)
        other = f'did you mean "{hint}"?' if hint else "install it, or remove the entry"
        reader.problems.add(
            where,
            f"names {quoted(text)}, a plugin that is not there",
            name='key "plugins"',
            allowed=", ".join(known),
            fix=failed[0] if failed else other,
        )
    return tuple(dict.fromkeys(named))


def _criteria(reader: Reader) -> Criteria | None:
    table = reader.table_of("criteria")
    if table is None:
        return None
    factor = table.number("factor_of_safety", Limits(1, 10))
    closure = table.number("closure_pct", Limits(0, 100, above=True), "%")
    table.finish()
    return None if factor is None or closure is None else Criteria(factor, closure)


def _schedule(reader: Reader) -> ScheduleRules | None:
    table = reader.table_of("schedule")
    if table is None:
        return None
    minimum = table.number("minimum_zone_m", Limits(0, 1e5), "m")
    carry = table.number("carry_m", Limits(0, 1e5), "m")
    table.finish()
    return None if minimum is None or carry is None else ScheduleRules(minimum, carry)


def _warnings(ground: Ground, registry: Registry) -> tuple[str, ...]:
    return (*ground.warnings, *(str(failure) for failure in registry.failures))
