"""The project's own source as text: which module imports which, and what docstrings say."""

from __future__ import annotations

import ast
import re
from collections.abc import Iterator
from pathlib import Path

ROOT = Path(__file__).parents[2]
DYNAMIC = ("import_module", "__import__")
"""Calls by which code imports without an import statement."""


def product_files() -> dict[str, Path]:
    """Every module of the distribution by its dotted name."""
    roots = [(ROOT, ROOT / "tunnelcalc"), *((p.parent, p) for p in plugin_folders())]
    return {
        dotted(path.relative_to(base)): path
        for base, folder in roots
        for path in sorted(folder.rglob("*.py"))
    }


def plugin_folders() -> list[Path]:
    """The plugins that come with the distribution."""
    return sorted(path.parent for path in (ROOT / "plugins").glob("*/__init__.py"))


def dotted(path: Path) -> str:
    """`a/b/__init__.py` is `a.b`, `a/b/c.py` is `a.b.c`."""
    return ".".join(path.with_suffix("").parts).removesuffix(".__init__")


def imports_of(name: str, text: str, is_package: bool = False) -> set[str]:
    """Every dotted name that a module imports, wherever in it the import stands.

    `from a import b` may mean the module `a.b` or a name in `a`: both are told.
    """
    found: set[str] = set()
    for node in ast.walk(ast.parse(text)):
        if isinstance(node, ast.Import):
            found.update(alias.name for alias in node.names)
        elif isinstance(node, ast.ImportFrom):
            base = _absolute(node, name, is_package)
            found.add(base)
            found.update(f"{base}.{alias.name}" for alias in node.names)
        elif isinstance(node, ast.Call) and _called(node) in DYNAMIC:
            found.update(a.value for a in node.args if isinstance(a, ast.Constant))
    return found


def _absolute(node: ast.ImportFrom, name: str, is_package: bool) -> str:
    if not node.level:
        return node.module or ""
    package = name.split(".") if is_package else name.split(".")[:-1]
    above = package[: len(package) - (node.level - 1)]
    return ".".join([*above, *([node.module] if node.module else [])])


def _called(node: ast.Call) -> str:
    return getattr(node.func, "attr", getattr(node.func, "id", ""))


def all_imports() -> dict[str, set[str]]:
    """What each module of the distribution imports."""
    return {
        name: imports_of(name, path.read_text(encoding="utf-8"), path.name == "__init__.py")
        for name, path in product_files().items()
    }


def within(imported: set[str], modules: set[str]) -> set[str]:
    """The modules of ours among the imported names: `a.b.NAME` counts as the module `a.b`, and
    `a` alone only where nothing below it is meant."""
    known = {name for name in imported if name in modules}
    known |= {name.rpartition(".")[0] for name in imported - modules} & modules
    return {name for name in known if not any(other.startswith(name + ".") for other in known)}


def circles(arrows: dict[str, set[str]]) -> list[list[str]]:
    """Rows of names of which each points to the next and the last to the first."""
    found: list[list[str]] = []
    finished: set[str] = set()

    def follow(name: str, trail: list[str]) -> None:
        if name in trail:
            found.append(trail[trail.index(name) :])
            return
        if name in finished:
            return
        for other in sorted(arrows.get(name, ())):
            follow(other, [*trail, name])
        finished.add(name)

    for name in sorted(arrows):
        follow(name, [])
    return found


def public_functions(text: str) -> Iterator[ast.FunctionDef]:
    """The functions of a module whose name does not begin with an underscore."""
    for node in ast.parse(text).body:
        if isinstance(node, ast.FunctionDef) and not node.name.startswith("_"):
            yield node


def parts_of(docstring: str) -> dict[str, str]:
    """The parts of a docstring by their underlined heading."""
    pieces = re.split(r"^(\w+)\n-+\n", docstring, flags=re.MULTILINE)
    return dict(zip(pieces[1::2], pieces[2::2], strict=True))


def described_parameters(part: str) -> dict[str, str]:
    """The entries of a part `Parameters`, `one, other : text`, by the name of each parameter."""
    entries: dict[str, str] = {}
    names: list[str] = []
    for line in part.splitlines():
        head = re.match(r"(\w+(?:, \w+)*) : (.*)", line)
        if head:
            names = head[1].split(", ")
            entries.update(dict.fromkeys(names, head[2]))
        elif line.startswith(" "):
            entries.update({name: f"{entries[name]} {line.strip()}" for name in names})
        elif line.strip():
            names = []
    return entries
