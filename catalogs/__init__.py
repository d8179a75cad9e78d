"""Bar sizes, steel grades, labour, prices and carbon as checked tables with named sources."""

from catalogs.bars import BUILTIN_CATALOGS, Bar, BarCatalog, bar_catalog
from catalogs.errors import CatalogError, TableError, UnknownNameError
from catalogs.labour import fixing_labour
from catalogs.prices import (
    BANDS,
    BUILTIN_PRICE_LISTS,
    Band,
    PriceList,
    Spread,
    price_list,
)
from catalogs.steel_grades import SteelGrade, steel_grade, steel_grades

__all__ = [
    "BANDS",
    "BUILTIN_CATALOGS",
    "BUILTIN_PRICE_LISTS",
    "Band",
    "Bar",
    "BarCatalog",
    "CatalogError",
    "PriceList",
    "Spread",
    "SteelGrade",
    "TableError",
    "UnknownNameError",
    "bar_catalog",
    "fixing_labour",
    "price_list",
    "steel_grade",
    "steel_grades",
]
