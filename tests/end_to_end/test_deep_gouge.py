"""The weaker the ground, the less it may pass: no rounding lets the worst ground through."""

from __future__ import annotations

from pathlib import Path

from end_to_end.projects import completed, rows

PROJECT = """\
title: Invented gouge
opening: {radius_m: 5}
ground: {table: ground.csv}
support_classes:
  - name: ring
    installed_at_m: 1
    elements:
      - {kind: shotcrete, thickness_mm: 1000, strength_mpa: 60, modulus_gpa: 20, poisson_ratio: 0.2}
criteria: {factor_of_safety: 1.5, closure_pct: 2}
schedule: {minimum_zone_m: 0, carry_m: 0}
"""
GSI = (40, 20, 10, 5, 4.5, 4, 3, 2)


def test_no_ground_weaker_than_one_that_fails_is_adequate(tmp_path: Path) -> None:
    header = (
        "from_m,to_m,cover_m,unit_weight_kn_m3,stress_ratio,dilation_deg,"
        "intact_strength_mpa,mi,gsi,disturbance,poisson_ratio\n"
    )
    lines = [f"{10 * k},{10 * k + 10},120,24,1,0,10,6,{gsi},1,0.3\n" for k, gsi in enumerate(GSI)]
    (tmp_path / "project.yaml").write_text(PROJECT)
    (tmp_path / "ground.csv").write_text(header + "".join(lines))
    classes = rows(completed(tmp_path) / "classes.csv")
    assert [row["adequate"] for row in classes] == ["no"] * len(GSI)
    closures = [float(row["installation_closure_mm"]) for row in classes]
    assert closures == sorted(closures)
    assert closures[0] > 0
