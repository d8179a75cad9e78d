"""Bar sizes, steel grades and fixing labour as checked tables with named sources."""

from catalogs.bars import BUILTIN_CATALOGS, Bar, BarCatalog, bar_catalog
from catalogs.errors import CatalogError, TableError, UnknownNameError
from catalogs.labour import fixing_labour
from catalogs.steel_grades import SteelGrade, steel_grade, steel_grades

__all__ = [
    "BUILTIN_CATALOGS",
    "Bar",
    "BarCatalog",
    "CatalogError",
    "SteelGrade",
    "TableError",
    "UnknownNameError",
    "bar_catalog",
    "fixing_labour",
    "steel_grade",
    "steel_grades",
]
