"""A study's folder read into one object, all its faults gathered."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import replace
from pathlib import Path
from typing import TypeVar

from pullback.studies.faults import BadInput, Fault, Faults
from pullback.studies.file.pull import PullSection
from pullback.studies.file.record import not_recorded
from pullback.studies.file.root import StudyFile
from pullback.studies.file.source import Source
from pullback.studies.folder import LARGEST_STUDY, Folder
from pullback.studies.near_grip import leave_out
from pullback.studies.requirements import (
    exact_pairs,
    has_pairs,
    missing_density,
    missing_gauges,
    negative_readings,
    too_few_failures,
    vanishing_errors,
    without_partner,
)
from pullback.studies.study import (
    AreaVariation,
    Demand,
    Gauge,
    Gauges,
    LawSpec,
    MarksTable,
    PartSpec,
    Pull,
    SamplerSpec,
    StatementSpec,
    Strength,
    Study,
)
from pullback.studies.tables import coupons, marks, outline, readings, sections
from pullback.studies.tables.dialect import read_table
from pullback.studies.tables.table import Table

T = TypeVar("T")
_NAME = "study.toml"


def read_study(path: str | Path) -> Study:
    """The study in a folder, or in the folder of a study.toml.

    Raises BadInput with every fault found: those of study.toml, or, where it has none, those of the tables and of what
    they need of each other.
    """
    root, name = _located(Path(path))
    folder = Folder(root)
    source = Source(folder.text(name, LARGEST_STUDY), name)
    try:
        return _Reader(folder, source.sections).study()
    except BadInput as bad:
        raise BadInput([source.placed(f) for f in bad.faults]) from None


def _located(path: Path) -> tuple[Path, str]:
    if path.is_dir():
        return path, _NAME
    if path.is_file():
        return path.parent, path.name
    expected = f"a folder with a {_NAME}, or that file"
    raise BadInput(Fault(file=str(path), read="no such file or folder", expected=expected))


class _Reader:
    """Reads the tables that the sections of a study file name, gathering faults and remarks."""

    def __init__(self, folder: Folder, sections: StudyFile) -> None:
        self.folder, self.file = folder, sections
        self.faults = Faults()
        self.excluded: list[str] = []
        self.assumed = sections.assumed()
        self.gauges = sections.pull[0].gauges.over(sections.gauges.gauges())

    def study(self) -> Study:
        """The whole; raises BadInput with all faults gathered."""
        f = self.file
        part = self._part()
        pull, strength = self._pull(f.pull[0], part), self._strength()
        if part is not None and pull is not None:
            self.faults += [*missing_density(part, pull), *negative_readings(part, pull, self.gauges)]
        if pull is not None:
            self.faults += [*missing_gauges(pull, strength, self.gauges), *vanishing_errors(pull, self.gauges)]
        if strength is not None:
            self.faults += [*exact_pairs(strength, self.gauges), *too_few_failures(strength)]
        self.faults.settle()
        assert part is not None and pull is not None
        self._list_gauges(pull, strength)
        variation = f.part.area_variation
        return Study(
            folder=self.folder.root,
            title=f.study.title,
            seed=f.study.seed,
            record=f.record,
            part=part,
            area_variation=AreaVariation(
                variation.lot, variation.part_to_part, variation.spread, variation.correlation(part.length)
            ),
            law=LawSpec(f.law.name, f.law.part_to_part, f.law.priors()),
            pulls=(pull,),
            gauges=self._density_error(part, pull),
            strength=strength,
            demands=tuple(Demand(d.name, d.force, d.factor) for d in f.demand),
            statement=StatementSpec(f.statement.reliability, f.statement.confidence, f.statement.applies_to),
            sampler=SamplerSpec(f.sampler.effective_samples, f.sampler.max_minutes),
            sha256=self.folder.combined_hash(),
            files=dict(sorted(self.folder.hashes.items())),
            assumed=self.assumed,
            excluded=self.excluded,
            warnings=list(without_partner(pull.marks, pull.readings)),
            not_recorded=not_recorded(f.record, [p.recorded() for p in f.pull]),
        )

    def _part(self) -> PartSpec | None:
        p = self.file.part
        table = self._table(p.outline, self.file.pull[0].piece, outline.KNOWN)
        read = self._gather(lambda t: outline.read_outline(t, p.length), table)
        if read is None:
            return None
        hardness, scale = p.hardness or (None, None)
        return PartSpec(p.length, read, p.density, hardness, scale, p.rubber)

    def _pull(self, p: PullSection, part: PartSpec | None) -> Pull | None:
        length = self.file.part.length
        mark_table = None if p.marks is None else self._table(p.marks, p.piece, ())
        if mark_table is not None and not marks.is_wide(mark_table):
            self.excluded += mark_table.unknown(marks.KNOWN)
        mark_rows = self._gather(lambda t: marks.read_marks(t, length), mark_table)
        reading_table = self._table(p.readings, p.piece, readings.KNOWN)
        marked = set(mark_rows.step) if mark_rows else set()
        reading_rows = self._gather(lambda t: readings.read_readings(t, p.driven_by, marked), reading_table)
        section_table = None if p.sections is None else self._table(p.sections, p.piece, sections.KNOWN)
        section_rows = self._gather(lambda t: sections.read_sections(t, length, self.gauges), section_table)
        if mark_rows is not None and part is not None and p.near_grip == "leave out":
            mark_rows = self._leave_out(mark_rows, part)
        if reading_rows is None:
            return None
        return Pull(
            piece=p.piece,
            driven_by=p.driven_by,
            axis=p.axis,
            force_at=p.force_at,
            tared=p.tared,
            marks=mark_rows,
            readings=reading_rows,
            sections=section_rows,
            mass=p.mass,
            mass_outside=p.mass_outside,
            temperature=p.temperature,
            hold=p.hold,
            conditioned=p.conditioned,
            near_grip=p.near_grip,
            record=p.record,
        )

    def _leave_out(self, rows: MarksTable, part: PartSpec) -> MarksTable | None:
        with self.faults.gathered():
            kept, sentences = leave_out(rows, part.outline, part.length)
            self.excluded += sentences
            return kept
        return None

    def _strength(self) -> Strength | None:
        s = self.file.strength
        if s is None:
            return None
        table = self._table(s.coupons, None, (*coupons.KNOWN, *coupons.NOT_USED))
        weakest = s.scatter == "weibull"
        rows = self._gather(lambda t: coupons.read_coupons(t, s.criterion, s.coupon_volume, weakest), table)
        if table is None or rows is None:
            return None
        self.excluded += [f"{table.file}: column {c} is not computed with" for c in coupons.NOT_USED if table.has(c)]
        if not table.has("broke"):
            self.assumed.append(f"{table.file} has no column broke: every coupon broke in its gauge")
        return Strength(s.criterion, s.scatter, rows, *s.priors())

    def _table(self, name: str, piece: str | None, known: tuple[str, ...]) -> Table | None:
        """A table's rows of a piece (None: of all); lists the columns that are not known, unless `known` is empty."""
        with self.faults.gathered():
            table = read_table(self.folder.text(name), name)
            if known:
                self.excluded += table.unknown(known)
            return table if piece is None else table.of_piece(piece)
        return None

    def _gather(self, read: Callable[[Table], T], table: Table | None) -> T | None:
        if table is None:
            return None
        with self.faults.gathered():
            return read(table)
        return None

    def _list_gauges(self, pull: Pull, strength: Strength | None) -> None:
        """What is assumed of gauges that are not given."""
        optional = ["travel_zero", "force_zero"] + (["grip_position", "position_scale"] if pull.marks else [])
        if strength is not None and has_pairs(strength.coupons):
            optional += ["coupon_elongation", "coupon_scale"]
        absent = [name for name in optional if getattr(self.gauges, name) is None]
        if absent:
            self.assumed.append(f"gauges not given and taken as exact: {', '.join(absent)}")

    def _density_error(self, part: PartSpec, pull: Pull) -> Gauges:
        """The gauges with the density's error relative, and with its default where a mass is used."""
        given = self.gauges.density
        if pull.mass is None or part.density is None:
            return self.gauges
        if given is None:
            self.assumed.append("gauges.density = 0.5 %: what a density by weighing in water usually holds")
            return replace(self.gauges, density=Gauge(0.005, relative=True))
        return self.gauges if given.relative else replace(self.gauges, density=Gauge(given.value / part.density, True))
