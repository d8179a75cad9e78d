"""A beam as JSON: complete, consistent in itself, in the trade's units."""

from __future__ import annotations

import json
from collections import Counter
from dataclasses import replace
from typing import Any

import numpy as np
import pytest

from engine.check_row import State
from optimizer.beams.json_beam import beam_json
from tests.beams.designs import designed, not_designed

CASES = [("us", False), ("si", True)]


def _data(units: str, cantilever: bool) -> dict[str, Any]:
    data: dict[str, Any] = json.loads(beam_json(designed(units, cantilever=cantilever)))
    return data


@pytest.mark.parametrize(("units", "cantilever"), CASES)
def test_head(units: str, cantilever: bool) -> None:
    """Format, status and units come first; supports and spans can be read alone."""
    data = _data(units, cantilever)
    assert list(data)[:2] == ["format", "version"]
    assert (data["format"], data["version"]) == ("cagewright/beam", 1)
    assert (data["status"], data["ok"], data["mark"]) == ("designed", True, "B1")
    wanted = {
        "us": {"length": "in", "force": "kip", "moment": "kip*ft", "mass": "lb"},
        "si": {"length": "mm", "force": "kN", "moment": "kN*m", "mass": "kg"},
    }[units]
    assert wanted.items() <= data["units"].items()
    ends = [span["start"] + span["length"] for span in data["spans"]]
    supports = [support["at"] for support in data["supports"]]
    assert supports == pytest.approx([0.0, *ends][: len(supports)])
    assert [span["cantilever"] for span in data["spans"]] == ["none"] * 2 + ["right"] * cantilever


@pytest.mark.parametrize(("units", "cantilever"), CASES)
def test_schedule_adds_up(units: str, cantilever: bool) -> None:
    """Counts are those of bars and stirrups, masses follow from lengths, the sum is the mass."""
    design, data = designed(units, cantilever=cantilever), _data(units, cantilever)
    bars = [bar for place in data["places"] for bar in place["bars"]] + data["other_bars"]
    counts = Counter[str]()
    for bar in bars:
        counts[bar["mark"]] += bar["count"]
    for zone in data["stirrups"]:
        for mark in zone["marks"]:
            counts[mark] += zone["sets"]
    per_length = {item.mark: item.bar.mass for item in design.schedule.marks}
    unit = 12.0 if units == "us" else 1000.0
    for item in data["schedule"]:
        assert item["count"] == counts.pop(item["mark"])
        each = per_length[item["mark"]] * item["length"] / unit
        assert item["mass_each"] == pytest.approx(each, rel=1e-12)
        assert item["mass"] == pytest.approx(each * item["count"], rel=1e-12)
        if item["shape"] == "straight":
            assert item["length"] >= item["legs"][0] - 1e-6
    assert not counts
    assert data["mass"] == pytest.approx(sum(item["mass"] for item in data["schedule"]), rel=1e-12)
    assert data["mass_per_volume"] == pytest.approx(data["mass"] / data["concrete"], rel=1e-12)


@pytest.mark.parametrize(("units", "cantilever"), CASES)
def test_layouts_are_made_of_the_bars(units: str, cantilever: bool) -> None:
    """Bars of a place and bars that run through the beam give its layout."""
    data = _data(units, cantilever)
    through = [bar for bar in data["other_bars"] if bar["role"] == "through"]
    for place in data["places"]:
        wanted = Counter[str]()
        for layer in place["layers"]:
            for group in layer:
                wanted[group["size"]] += group["count"]
        found = Counter[str]()
        for bar in place["bars"]:
            found[bar["size"]] += bar["count"]
        if place["face"] == "top" and through:
            found[through[0]["size"]] += through[0]["count"]
        assert found == wanted, place["mark"]


@pytest.mark.parametrize(("units", "cantilever"), CASES)
def test_strength_covers_demand(units: str, cantilever: bool) -> None:
    """At every station of the envelopes, read back from the file alone."""
    data = _data(units, cantilever)
    for span, demand, strength in zip(
        data["spans"], data["demands"], data["strengths"], strict=True
    ):
        assert span["mark"] == demand["span"] == strength["span"]
        x = np.array(demand["x"])
        assert np.all(np.diff(x) > 0.0)
        assert (x[0], x[-1]) == pytest.approx((span["clear_from"], span["clear_to"]))
        for name, values in (
            ("phi_Mn_sagging", np.array(demand["Mu_most"])),
            ("phi_Mn_hogging", -np.array(demand["Mu_least"])),
        ):
            there = np.interp(x, strength["x"], strength[name])
            # Within the cover at a free tip there is no bar, and next to no moment.
            spare = 2e-3 if span["cantilever"] != "none" else 1e-6
            assert np.all(there >= values - spare * np.abs(values).max())
        assert {len(demand[name]) for name in ("Mu_most", "Vu", "Ms_most", "Ms_least")} == {len(x)}
        assert {len(strength[name]) for name in ("phi_Vn", "spacing")} == {len(strength["x"])}


@pytest.mark.parametrize(("units", "cantilever"), CASES)
def test_values_are_those_of_the_design(units: str, cantilever: bool) -> None:
    """Trade units are the inner ones divided by their factor, far beyond six digits."""
    design, data = designed(units, cantilever=cantilever), _data(units, cantilever)
    moment, force = (12_000.0, 1000.0) if units == "us" else (1e6, 1000.0)
    own = design.demands[0]
    assert data["demands"][0]["Mu_most"] == pytest.approx(list(own.Mu_most / moment), rel=1e-11)
    assert data["demands"][0]["Vu"] == pytest.approx(list(own.Vu / force), rel=1e-11)
    assert data["cost"] == design.cost
    assert data["bound"] == design.bound
    assert (data["proved"], data["gap"]) == (True, pytest.approx(0.0, abs=1e-6))


@pytest.mark.parametrize(("units", "cantilever"), CASES)
def test_cutting_covers_the_schedule(units: str, cantilever: bool) -> None:
    """Every bar of the schedule is cut once, and waste is bought less used."""
    data = _data(units, cantilever)
    cut = Counter[str]()
    for plan in data["cutting"]:
        assert plan["bought"] == pytest.approx(plan["used"] + plan["waste"])
        for bar in plan["bars"]:
            for piece in bar["pieces"]:
                cut[piece["mark"]] += piece["count"] * bar["count"]
    assert cut == {item["mark"]: item["count"] for item in data["schedule"]}


def test_checks_are_all_there() -> None:
    """One entry a row, in their order, sizes in the unit that stands beside them."""
    design, data = designed(), _data("us", cantilever=False)
    assert len(design.checks) > 20
    assert [row["id"] for row in data["checks"]] == [row.id for row in design.checks]
    of_moment = next(
        (own, row)
        for own, row in zip(design.checks, data["checks"], strict=True)
        if own.quantity == "moment" and own.demand
    )
    assert of_moment[1]["unit"] == "kip*ft"
    assert of_moment[1]["demand"] == pytest.approx((of_moment[0].demand or 0.0) / 12_000.0)


def test_infinite_figures_become_null() -> None:
    """JSON has no infinity: a limit without end, or a ratio to nothing, is null."""
    design = designed()
    row = replace(design.checks[0], limit=np.inf, ratio=np.inf, state=State.FAILS)
    data = json.loads(beam_json(replace(design, checks=(row,))))
    assert (data["checks"][0]["limit"], data["checks"][0]["ratio"]) == (None, None)
    assert data["ok"] is False


def test_no_design() -> None:
    """Status, reasons and demands; nothing that only a design has."""
    data = json.loads(beam_json(not_designed()))
    assert data["status"] == "no_design"
    assert data["reasons"] == list(not_designed().reasons)
    assert data["proved"] is True
    assert len(data["demands"]) == 2
    assert not {"ok", "schedule", "checks", "cost", "strengths"} & set(data)


def test_other_characters_can_be_escaped() -> None:
    """For terminals without Unicode."""
    design = designed()
    named = replace(design, problem=replace(design.problem, title="Träger"))
    assert "Träger" in beam_json(named)
    escaped = beam_json(named, ascii_only=True)
    assert escaped.isascii()
    assert json.loads(escaped)["title"] == "Träger"
