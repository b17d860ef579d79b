"""Stages and the chain that they form."""

from __future__ import annotations

from collections.abc import Callable, Container, Iterable, Mapping, Sequence
from dataclasses import dataclass

from tunnelcalc.arrays import Array
from tunnelcalc.errors import StageError
from tunnelcalc.sections import Sections, joined


@dataclass(frozen=True, slots=True)
class Stage:
    """One step from columns to columns.

    A stage may complete a column that stands already by naming it in `needs` and `gives`. A
    stage with `whole_alignment` sees all sections at once; the others work in chunks, and none
    of their results depends on how the sections were cut.
    """

    name: str
    meaning: str
    needs: tuple[str, ...]
    gives: tuple[str, ...]
    compute: Callable[[Sections], Mapping[str, Array]]
    whole_alignment: bool = False

    def __call__(self, sections: Sections) -> Sections:
        """The sections with what this stage gives.

        Raises StageError when a needed column is missing or the stage breaks its promise.
        """
        _must_stand(self, sections)
        given = self.compute(sections)
        if set(given) != set(self.gives):
            raise StageError(f"stage {self.name} gave {sorted(given)}, not {sorted(self.gives)}")
        return sections.with_columns(given)


def check_chain(stages: Sequence[Stage], given: Iterable[str]) -> None:
    """Raise StageError, naming stage and column, unless each need is given before it is used."""
    standing = set(given)
    whole_before = ""
    for stage in stages:
        _must_stand(stage, standing)
        if stage.whole_alignment:
            whole_before = stage.name
        elif whole_before:
            raise StageError(f"stage {stage.name} works in chunks but follows {whole_before}")
        standing.update(stage.gives)


def _must_stand(stage: Stage, standing: Container[str]) -> None:
    missing = [name for name in stage.needs if name not in standing]
    if missing:
        raise StageError(
            f"stage {stage.name} needs {', '.join(missing)}, "
            "which neither the inputs nor an earlier stage give"
        )


def run_stages(
    stages: Sequence[Stage],
    sections: Sections,
    chunk_sections: int,
    keep: Container[str],
    each_chunk: Callable[[Sections], None],
) -> Sections:
    """Run the chain: chunk by chunk first, then over the whole alignment.

    Parameters
    ----------
    stages : the chain, as `check_chain` accepts it.
    sections : the inputs.
    chunk_sections : the most sections computed together.
    keep : columns that outlive their chunk.
    each_chunk : called with every column of each finished chunk, in order.
    """
    if chunk_sections < 1:
        raise ValueError("chunk_sections must be at least 1")
    check_chain(stages, sections)
    in_chunks = [stage for stage in stages if not stage.whole_alignment]
    kept_names = [name for stage in in_chunks for name in stage.gives if name in keep]
    kept: list[Sections] = []
    for start in range(0, sections.count, chunk_sections):
        chunk = sections.take(slice(start, start + chunk_sections))
        for stage in in_chunks:
            chunk = stage(chunk)
        each_chunk(chunk)
        kept.append(chunk.only(kept_names))
    whole = sections.with_columns(joined(kept)) if kept else sections
    for stage in stages:
        if stage.whole_alignment:
            whole = stage(whole)
    return whole
