"""Section mechanics and code checks of reinforced concrete beams; needs no solver."""

from engine.assessment import Assessment, assess, required_share
from engine.batch import Batch
from engine.check_row import Check, State
from engine.checks import CheckedLayout, check_layout, check_layouts
from engine.confinement import Confinement, confinement_of, is_top_bar, meets_short_form
from engine.cover import Exposure
from engine.cracked_section import CrackedSection, cracked_section
from engine.development import Development, short_form_length, straight_length
from engine.editions import EDITIONS, Edition, edition
from engine.errors import (
    EngineError,
    LayoutError,
    OutOfRangeError,
    QuantityError,
    UnknownEditionError,
)
from engine.flange_width import Slab, effective_flange_width
from engine.hooks import hooked_length
from engine.laps import lap_length, short_form_lap_length
from engine.layouts import Layer, Layout, parse_layout
from engine.materials import Concrete, Steel
from engine.outlines import Flange, Outline, Profile
from engine.placement import Placement, place
from engine.sections import Section
from engine.strength import BarGroups, FlexuralState, flexural_state
from engine.units import parse_quantity

__all__ = [
    "EDITIONS",
    "Assessment",
    "BarGroups",
    "Batch",
    "Check",
    "CheckedLayout",
    "Concrete",
    "Confinement",
    "CrackedSection",
    "Development",
    "Edition",
    "EngineError",
    "Exposure",
    "Flange",
    "FlexuralState",
    "Layer",
    "Layout",
    "LayoutError",
    "OutOfRangeError",
    "Outline",
    "Placement",
    "Profile",
    "QuantityError",
    "Section",
    "Slab",
    "State",
    "Steel",
    "UnknownEditionError",
    "assess",
    "check_layout",
    "check_layouts",
    "confinement_of",
    "cracked_section",
    "edition",
    "effective_flange_width",
    "flexural_state",
    "hooked_length",
    "is_top_bar",
    "lap_length",
    "meets_short_form",
    "parse_layout",
    "parse_quantity",
    "place",
    "required_share",
    "short_form_lap_length",
    "short_form_length",
    "straight_length",
]
