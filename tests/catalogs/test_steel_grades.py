"""Steel grades: lookup, the listed strengths and the editions they go with.

Yield strengths of the ASTM grades: ACI 318-19 / 318M-19, Table 20.2.2.4(a) pairs 60, 80 and
100 ksi with 420, 550 and 690 MPa; grade 40 (280) by ASTM A615/A615M. Tensile strengths and the CSA
and BS 4449 figures are from memory.
"""

import pytest

from catalogs import SteelGrade, UnknownNameError, steel_grade, steel_grades

ALL_EDITIONS = ("ACI 318-14", "ACI 318-19", "ACI 318M-14", "ACI 318M-19")
MPA_PER_PSI = 0.45359237 * 9.80665 / 645.16


@pytest.mark.parametrize(
    ("name", "alias", "fy_psi", "fy_mpa", "fu_psi", "fu_mpa"),
    [
        ("A615-40", "A615-280", 40000, 280, 60000, 420),
        ("A615-60", "A615-420", 60000, 420, 90000, 620),
        ("A615-80", "A615-550", 80000, 550, 105000, 725),
        ("A615-100", "A615-690", 100000, 690, 115000, 790),
        ("A706-60", "A706-420", 60000, 420, 80000, 550),
        ("A706-80", "A706-550", 80000, 550, 100000, 690),
    ],
)
def test_astm_grades(
    name: str, alias: str, fy_psi: float, fy_mpa: float, fu_psi: float, fu_mpa: float
) -> None:
    """Both names give the grade with the strengths of the standard (tensile: from memory)."""
    grade = steel_grade(name)
    assert steel_grade(alias) is grade
    assert (grade.name, grade.alias) == (name, alias)
    assert (grade.yield_strength("us"), grade.yield_strength("si")) == (fy_psi, fy_mpa)
    assert (grade.ultimate_us, grade.ultimate_si) == (fu_psi, fu_mpa)
    assert grade.standard == f"ASTM {name[:4]}/{name[:4]}M"


@pytest.mark.parametrize(
    ("name", "fy_mpa", "fu_mpa"),
    [("CSA-400W", 400, 540), ("CSA-500W", 500, 625), ("B500B", 500, 540)],
)
def test_metric_only_grades(name: str, fy_mpa: float, fu_mpa: float) -> None:
    """CSA G30.18 and BS 4449:2005 (from memory): no in-lb strength, metric editions, a note."""
    grade = steel_grade(name)
    assert (grade.yield_strength("si"), grade.ultimate_si) == (fy_mpa, fu_mpa)
    assert (grade.yield_us, grade.ultimate_us) == (None, None)
    assert grade.editions == ("ACI 318M-14", "ACI 318M-19")
    assert "20.2.1" in grade.note
    assert "authority having jurisdiction" in grade.note
    with pytest.raises(
        UnknownNameError,
        match=f"'{name}' is not listed in system 'us'; allowed: si; hint: give fy instead",
    ) as caught:
        grade.yield_strength("us")
    assert caught.value.allowed == ("si",)


def test_grade_100_starts_with_the_2019_editions() -> None:
    """Table 20.2.2.4a for flexure: ACI 318-14 80 ksi (from memory), ACI 318-19 100 ksi."""
    assert steel_grade("A615-100").editions == ("ACI 318-19", "ACI 318M-19")
    others = [grade for grade in steel_grades() if grade.standard.startswith("ASTM")]
    others.remove(steel_grade("A615-100"))
    assert len(others) == 5
    assert {grade.editions for grade in others} == {ALL_EDITIONS}


@pytest.mark.parametrize("grade", steel_grades(), ids=lambda grade: grade.name)
def test_figures_hang_together(grade: SteelGrade) -> None:
    """Bars break above yield, and the two systems round the same strength."""
    assert grade.ultimate_si >= 1.05 * grade.yield_si
    assert set(grade.editions) <= set(ALL_EDITIONS)
    if grade.yield_us is not None and grade.ultimate_us is not None:
        assert grade.ultimate_us >= 1.05 * grade.yield_us
        # Hard rounding of the metric entries: to 10 MPa for most, to 5 for some.
        assert grade.yield_si == pytest.approx(grade.yield_us * MPA_PER_PSI, abs=7.0)
        assert grade.ultimate_si == pytest.approx(grade.ultimate_us * MPA_PER_PSI, abs=7.0)


def test_nine_grades_and_no_name_twice() -> None:
    """Names and metric names are one set of keys."""
    grades = steel_grades()
    names = [grade.name for grade in grades] + [grade.alias for grade in grades if grade.alias]
    assert len(grades) == 9
    assert len({name.casefold() for name in names}) == len(names) == 15


def test_checksum() -> None:
    """A slip in any one strength changes a sum."""
    grades = steel_grades()
    assert sum(grade.yield_us or 0.0 for grade in grades) == 420_000.0
    assert sum(grade.ultimate_us or 0.0 for grade in grades) == 550_000.0
    assert sum(grade.yield_si for grade in grades) == 4310.0
    assert sum(grade.ultimate_si for grade in grades) == 5500.0


def test_lookup_ignores_case_and_blanks() -> None:
    """The name may be typed as it comes."""
    assert steel_grade(" a615-60 ") is steel_grade("A615-60")
    assert steel_grade("b500b").name == "B500B"


@pytest.mark.parametrize(
    ("asked", "hint"), [("A615 60", "A615-60"), ("A706-42", "A706-420"), ("500B", "B500B")]
)
def test_unknown_grade_hints_at_the_nearest(asked: str, hint: str) -> None:
    """A near miss is refused with the grade that was probably meant."""
    message = f"(?s)^steel grade '{asked}' is not known; allowed: A615-40, .*name is '{hint}'$"
    with pytest.raises(UnknownNameError, match=message):
        steel_grade(asked)


def test_unknown_system() -> None:
    """Only two systems of units exist."""
    with pytest.raises(
        UnknownNameError, match="system of units 'metric' is not known; allowed: us"
    ):
        steel_grade("A615-60").yield_strength("metric")
