"""Length that develops a standard hook in tension, ACI 318, 25.4.3.

The two editions have different equations, not different figures in one: the 2014 length is
linear in the bar's diameter and is reduced where cover or ties help, the 2019 length grows
with its power 1.5 and is increased where they are missing.
"""

from __future__ import annotations

from dataclasses import dataclass

from catalogs import Bar
from engine.development import Development, bond_stress, require_one_edition
from engine.development_rules import development_rules
from engine.errors import OutOfRangeError
from engine.materials import Concrete, Steel

HOOK_COATED = 1.2
"""psi_e of a hook coated with epoxy, Table 25.4.3.2. [-]"""
_CLAUSE = "25.4.3.1"
_ROUNDING = 1e-9
_LEAST_IN_DIAMETERS = 8.0


@dataclass(frozen=True, slots=True, kw_only=True)
class _HookRules:
    """Printed figures of 25.4.3 in one edition.

    `multiplier` scales fy/(lambda sqrt f'c) db^power; `least` and the two covers are
    [in or mm]. psi_c of 2019 is f'c/slope + 0.6 below `full_from` [psi or MPa].
    """

    multiplier: float
    power: float
    least: float
    side_cover: float
    tail_cover: float
    slope: float = 0.0
    full_from: float = 0.0


_RULES = {
    "ACI 318-14": _HookRules(
        multiplier=1.0 / 50.0, power=1.0, least=6.0, side_cover=2.5, tail_cover=2.0
    ),
    "ACI 318-19": _HookRules(
        multiplier=1.0 / 55.0,
        power=1.5,
        least=6.0,
        side_cover=2.5,
        tail_cover=2.0,
        slope=15_000.0,
        full_from=6000.0,
    ),
    "ACI 318M-14": _HookRules(
        multiplier=0.24, power=1.0, least=150.0, side_cover=65.0, tail_cover=50.0
    ),
    "ACI 318M-19": _HookRules(
        multiplier=1.0 / 23.0,
        power=1.5,
        least=150.0,
        side_cover=65.0,
        tail_cover=50.0,
        slope=105.0,
        full_from=42.0,
    ),
}


def hooked_length(
    concrete: Concrete,
    steel: Steel,
    bar: Bar,
    *,
    coated: bool = False,
    side_cover: float = 0.0,
    tail_cover: float = 0.0,
    in_core: bool = False,
    tied: bool = False,
) -> Development:
    """Development length ldh of a standard hook, critical section to outside of the bend.

    Left at their defaults the conditions are those of a hook about which nothing is known,
    which gives the longest length. There is no factor for top bars.

    Parameters
    ----------
    concrete, steel : Concrete, Steel
        Materials.
    bar : Bar
        Size of the bar.
    coated : bool
        Whether it is coated with epoxy.
    side_cover : float
        Clear cover normal to the plane of the hook. [in or mm]
    tail_cover : float
        Clear cover on the extension beyond a 90-degree hook, infinite for a 180-degree one;
        for psi_c of ACI 318-14 only. [in or mm]
    in_core : bool
        Whether the hook ends inside a column core; for psi_o of ACI 318-19 only.
    tied : bool
        ACI 318-14: whether ties at most 3 db apart enclose the hook along ldh. ACI 318-19:
        whether Ath is at least 0.4 Ahs or the hooks are at least 6 db apart on centres.

    Returns
    -------
    Development
        ldh of 25.4.3.1, at least 8 db and 6 in or 150 mm. At a discontinuous end with
        little cover ties are required besides: 25.4.3.3 in ACI 318-14, 25.4.3.4 in -19.

    Raises
    ------
    OutOfRangeError
        If a cover is negative or no number, or the editions or units differ.
    """
    require_one_edition(concrete, steel, bar)
    for what, cover in (("side_cover", side_cover), ("tail_cover", tail_cover)):
        if not cover >= 0.0:
            msg = f"got {cover:g}; allowed: 0 or more"
            raise OutOfRangeError(msg, what=what)
    edition = concrete.edition
    rules = _RULES[edition.name]
    # Beyond No. 11 (36) no condition helps: all are stated for that size and smaller.
    eligible = bar.diameter <= development_rules(edition).largest_lapped
    covered = side_cover >= rules.side_cover - _ROUNDING
    factors = {"psi_e": HOOK_COATED if coated else 1.0}
    if edition.year < 2019:
        tail = tail_cover >= rules.tail_cover - _ROUNDING
        factors["psi_c"] = 0.7 if eligible and covered and tail else 1.0
        factors["psi_r"] = 0.8 if eligible and tied else 1.0
    else:
        far = side_cover >= 6.0 * bar.diameter - _ROUNDING
        factors["psi_r"] = 1.0 if eligible and tied else 1.6
        factors["psi_o"] = 1.0 if eligible and ((in_core and covered) or far) else 1.25
        weak = concrete.fc < rules.full_from
        factors["psi_c"] = concrete.fc / rules.slope + 0.6 if weak else 1.0
    unlimited = bar.diameter**rules.power * steel.fy * rules.multiplier
    for factor in factors.values():
        unlimited *= factor
    lam, root = bond_stress(concrete)
    unlimited /= lam * root
    return Development(
        length=max(unlimited, _LEAST_IN_DIAMETERS * bar.diameter, rules.least),
        unlimited=unlimited,
        factors={**factors, "lambda": lam},
        clause=_CLAUSE,
    )
