"""Damages the example projects at random and reads them: a project or a list of problems.

Anything else that is raised is a finding: it is printed, its input is kept, and the command ends
with 1. `python -m tests.fuzz --minutes 10 [--seed 1]`; the number of inputs tried is printed.
"""

from __future__ import annotations

import argparse
import random
import shutil
import sys
import tempfile
import time
import traceback
from pathlib import Path

from tunnelcalc.errors import InputError
from tunnelcalc.inputs.project_file import read_project
from tunnelcalc.plugin.registry import load_plugins

PROJECTS = Path(__file__).parents[2] / "projects"
FRAGMENTS = (
    *(b"", b",", b";", b"\t", b"\n", b'"', b"'", b"\0", b"\xff", b"\xef\xbb\xbf", b":", b"- "),
    *(b"nan", b"inf", b"1e400", b"-1", b"0", b"1,5", b"1.250,0", b"12+345.60", b"@2", b"*a", b"&a"),
    *(b"from_m", b"gsi", b"[", b"]", b"{", b"}", b"#", b"../x.csv", b"\xe2\x80\xae"),
)
MOST_CHANGES = 4


def damaged(content: bytes, draw: random.Random) -> bytes:
    """The content with a few pieces cut out, doubled, moved or replaced."""
    for _ in range(draw.randint(1, MOST_CHANGES)):
        start = draw.randint(0, len(content))
        end = min(len(content), start + draw.choice((0, 1, 3, 10, 60)))
        piece = draw.choice((draw.choice(FRAGMENTS), content[start:end] * 2, b""))
        content = content[:start] + piece + content[end:]
    return content


def main() -> int:
    """Try damaged inputs until the time is over."""
    parser = argparse.ArgumentParser(description=__doc__)
    parser.add_argument("--minutes", type=float, default=1.0)
    parser.add_argument("--seed", type=int, default=1)
    options = parser.parse_args()
    draw = random.Random(options.seed)
    registry = load_plugins()
    examples = sorted(path.parent for path in PROJECTS.glob("*/project.yaml"))
    tried = accepted = found = 0
    end = time.monotonic() + 60 * options.minutes
    while time.monotonic() < end:
        with tempfile.TemporaryDirectory() as scratch:
            project = Path(scratch) / "project"
            example = draw.choice(examples)
            shutil.copytree(example, project, ignore=shutil.ignore_patterns("runs"))
            victim = draw.choice(sorted(path for path in project.iterdir() if path.is_file()))
            victim.write_bytes(damaged(victim.read_bytes(), draw))
            tried += 1
            try:
                read_project(project, registry)
                accepted += 1
            except InputError:
                pass
            except Exception:
                found += 1
                kept = Path(tempfile.mkdtemp(prefix="tunnelcalc-fuzz-"))
                shutil.copytree(project, kept / example.name)
                print(f"kept in {kept}\n{traceback.format_exc()}")
    print(f"{tried} inputs tried, {accepted} accepted, {found} findings")
    return 1 if found else 0


if __name__ == "__main__":
    sys.exit(main())
