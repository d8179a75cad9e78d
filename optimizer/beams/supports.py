"""The supports of a beam job: marks, widths and the stiffness of columns."""

from __future__ import annotations

from collections.abc import Sequence
from itertools import pairwise

from engine import Concrete
from engine.beams.spans import FIXED, Overhang, Support, SupportKind
from optimizer.beams.keys import BeamJobKeys, ColumnKeys, SupportKeys
from optimizer.errors import JobError
from optimizer.job_messages import short

_LONGEST_MARK = 8
_FAR_END = {"fixed": 4.0, "pinned": 3.0}  # moment per rotation of a bar, over E I / L


def column_stiffness(column: ColumnKeys, concrete: Concrete) -> float:
    """Moment per rotation that a column adds where it meets the beam.

    Parameters
    ----------
    column : ColumnKeys
        Its sides, `depth` along the beam, its height and its far end.
    concrete : Concrete
        Concrete of the job, which the column is taken to have too.

    Returns
    -------
    float
        4 E I / L with a fixed far end, 3 E I / L with a pinned one; I of the gross section.
        [lbf*in or N*mm, per rad]
    """
    inertia = column.width * column.depth**3 / 12.0
    return _FAR_END[column.far] * concrete.Ec * inertia / column.height


def read_supports(
    given: Sequence[SupportKeys], concrete: Concrete, name: str
) -> tuple[Support, ...]:
    """Read the supports.

    Parameters
    ----------
    given : sequence of SupportKeys
        Keys, from left to right.
    concrete : Concrete
        Concrete of the job.
    name : str
        What to call the job in messages.

    Returns
    -------
    tuple of Support
        The supports, from left to right.

    Raises
    ------
    JobError
        If a mark is none or used twice, or columns and the kind of end do not match.
    """
    supports: list[Support] = []
    for number, keys in enumerate(given, 1):
        where = f'{name}: support {number} "{short(keys.mark)}"'
        _check_mark(keys.mark, f"{name}: support {number}")
        if any(keys.mark == other.mark for other in supports):
            msg = f"{where}, mark: used twice; allowed: a different mark for each support"
            raise JobError(msg)
        supports.append(
            Support(
                mark=keys.mark,
                width=keys.width,
                kind=SupportKind(keys.kind),
                stiffness=_stiffness(keys, concrete, where),
                ties=keys.ties,
            )
        )
    return tuple(supports)


def read_overhangs(job: BeamJobKeys, name: str) -> list[Overhang]:
    """Find out which spans are cantilevers, and whether the supports match.

    Parameters
    ----------
    job : BeamJobKeys
        Keys of the job.
    name : str
        What to call the job in messages.

    Returns
    -------
    list of Overhang
        One for each span.

    Raises
    ------
    JobError
        If a cantilever is not at its end of the beam, no span lies between two supports, or
        there are too many or too few supports.
    """
    last = len(job.span) - 1
    found = []
    for number, span in enumerate(job.span):
        end = {None: number, "left": 0, "right": last}[span.cantilever]
        if number != end:
            which = "first" if span.cantilever == "left" else "last"
            msg = (
                f'{name}: span {number + 1}, cantilever: got "{span.cantilever}";'
                f" allowed: in the {which} [[span]] only"
            )
            raise JobError(msg)
        found.append(Overhang(span.cantilever or "none"))
    inner = found.count(Overhang.NONE)
    if inner == 0:
        msg = (
            f"{name}: span: cantilevers alone, none between two supports;"
            " allowed: at least one span between two supports"
        )
        raise JobError(msg)
    supports = len(job.support)
    if supports != inner + 1:
        words = "1 span" if inner == 1 else f"{inner} spans"
        msg = (
            f"{name}: support: got {supports} for {words} between supports; allowed:"
            f" {inner + 1}; hint: a cantilever needs none at its free end"
        )
        raise JobError(msg)
    return found


def span_marks(supports: Sequence[Support], overhangs: Sequence[Overhang]) -> list[str]:
    """Name the spans after the supports at their ends.

    Parameters
    ----------
    supports : sequence of Support
        Supports, from left to right.
    overhangs : sequence of Overhang
        Which spans are cantilevers.

    Returns
    -------
    list of str
        For example ``-A``, ``A-B``, ``B-``.
    """
    names = [support.mark for support in supports]
    if overhangs[0] is Overhang.LEFT:
        names.insert(0, "")
    if overhangs[-1] is Overhang.RIGHT:
        names.append("")
    return [f"{left}-{right}" for left, right in pairwise(names)]


def _check_mark(mark: str, where: str) -> None:
    """Marks of spans are made of those of supports: "A-B"."""
    plain = all(sign.isalnum() or sign in ".'" for sign in mark)
    if not plain or len(mark) > _LONGEST_MARK:
        msg = (
            f"{where}, mark: got {short(repr(mark))}; allowed: letters, digits, . and ',"
            f" up to {_LONGEST_MARK} of them"
        )
        raise JobError(msg)


def _stiffness(keys: SupportKeys, concrete: Concrete, where: str) -> float:
    columns = [column for column in (keys.below, keys.above) if column is not None]
    ends = keys.ends or ("columns" if columns else "free")
    if ends == "columns" and not columns:
        msg = f'{where}, ends: got "columns" without a column; hint: give below, above or both'
        raise JobError(msg)
    if ends != "columns" and columns:
        msg = (
            f'{where}, ends: got "{ends}" beside columns below or above; allowed: "columns";'
            " hint: leave one of the two out"
        )
        raise JobError(msg)
    if ends == "fixed":
        return FIXED
    return sum((column_stiffness(column, concrete) for column in columns), start=0.0)
