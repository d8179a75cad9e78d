"""What `import engine` offers."""

from __future__ import annotations

import engine


def test_every_public_name_exists_and_is_sorted() -> None:
    """`__all__` lists what can be imported, constants first, then in order."""
    assert len(set(engine.__all__)) == len(engine.__all__)
    assert list(engine.__all__) == sorted(
        engine.__all__, key=lambda name: (not name.isupper(), name[0].islower(), name)
    )
    assert all(getattr(engine, name) is not None for name in engine.__all__)


def test_strength_in_three_lines() -> None:
    """4 #8 at 21.5 in in a 14 in web: a = As fy/(0.85 f'c b), Mn = As fy (d - a/2)."""
    code = engine.edition("ACI 318-19")
    concrete, steel = engine.Concrete(edition=code, fc=4000.0), engine.Steel(edition=code, fy=6e4)
    import numpy as np

    bars = engine.BarGroups(
        area=np.array([[3.16]]), depth=np.array([[21.5]]), diameter=np.array([[1.0]])
    )
    profile = engine.Outline(web=14.0, depth=24.0).profile(sagging=True)
    state = engine.flexural_state(profile, concrete, steel, bars)
    a = 3.16 * 60_000 / (0.85 * 4000 * 14)
    np.testing.assert_allclose(state.Mn, 3.16 * 60_000 * (21.5 - a / 2), rtol=1e-12)
