"""The templates of the page, filled: every text escaped, nothing undefined let through."""

from __future__ import annotations

from functools import cache

import jinja2

from engine import Edition
from optimizer.documents.wording import Figures, formula, visible
from optimizer.wording import CAUTION, NOT_CHECKED

_UNITS = ("length", "area", "force", "moment", "stress", "mass_per_length")


def render(template: str, *, edition: Edition, title: str, kind: str, **parts: object) -> str:
    """Fill a template of the page.

    Parameters
    ----------
    template : str
        Name of the template.
    edition : Edition
        Code edition, which decides the units.
    title : str
        Title of the job as given; empty for none.
    kind : str
        What the page shows.
    **parts : object
        What this template takes besides.

    Returns
    -------
    str
        HTML.
    """
    figures = Figures(edition)
    return (
        _environment()
        .get_template(template)
        .render(
            title=visible(title) or kind,
            kind=kind,
            code=edition.name,
            units={name: figures.unit(name) for name in _UNITS},
            not_checked=NOT_CHECKED,
            caution=CAUTION,
            **parts,
        )
    )


@cache
def _environment() -> jinja2.Environment:
    environment = jinja2.Environment(
        loader=jinja2.PackageLoader(__package__),
        autoescape=True,
        trim_blocks=True,
        lstrip_blocks=True,
        undefined=jinja2.StrictUndefined,
    )
    environment.filters["formula"] = formula
    return environment
