"""The table of all checks, and how the command ends where one of them differs."""

from __future__ import annotations

from pathlib import Path

from end_to_end.foreign import HEAD, install
from end_to_end.projects import tunnelcalc

OTHERS = (
    HEAD
    + """

def boom():
    raise ValueError("no solution here")


def check(subject, computed):
    return api.VerificationCheck(
        "stranger", subject, "invented table", api.Standing.PUBLISHED, "MPa", 0.005,
        lambda: 1.25, computed,
    )


@api.hookimpl
def tunnelcalc_register_verification_checks(register):
    register(check("CASE", lambda: COMPUTED))
"""
)
WIDE = {"COLUMNS": "200"}


def verification(folder: Path, *, computed: str):
    source = OTHERS.replace("CASE", "first case").replace("COMPUTED", computed)
    environment = install(folder / "site", "verifying", source)
    return tunnelcalc("verification", folder=folder, environment={**environment, **WIDE})


def test_all_own_checks_agree_and_are_listed_with_source_and_numbers(tmp_path: Path):
    ended = tunnelcalc("verification", folder=tmp_path, environment=WIDE)
    assert (ended.returncode, ended.stderr) == (0, "")
    count = ended.stdout.splitlines()[-1].split()
    assert count[0] == count[2]
    assert count[1:2] + count[3:] == ["of", "checks", "agree"]
    # Single words: others may be broken over two lines of the table.
    for text in ("hoek_brown_2002", "Duncan", "Balmer", "jcond89_rqd", "independent", "published"):
        assert text in ended.stdout


def test_a_check_of_another_distribution_is_one_of_them(tmp_path: Path):
    ended = verification(tmp_path, computed="1.254")
    assert ended.returncode == 0
    assert "stranger: first case" in ended.stdout


def test_a_difference_ends_with_5_and_is_named(tmp_path: Path):
    ended = verification(tmp_path, computed="1.256")
    assert ended.returncode == 5
    assert "6.0e-03 !" in ended.stdout
    *_, differs, count = ended.stdout.splitlines()
    assert differs == "differs: stranger: first case"
    agreeing, _, total, *_ = count.split()
    assert int(total) - int(agreeing) == 1


def test_what_is_no_number_differs(tmp_path: Path):
    assert verification(tmp_path, computed="float('nan')").returncode == 5


def test_a_check_that_raises_differs_and_spoils_no_other(tmp_path: Path):
    ended = verification(tmp_path, computed="boom()")
    assert ended.returncode == 5
    assert "Traceback" not in ended.stderr
    assert "differs: stranger: first case: ValueError: no solution here" in ended.stdout
