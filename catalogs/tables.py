"""The reader of tables for the other packages: header row, units row, then data."""

from catalogs._tables import Column, Row, Table, table_error
from catalogs._tables import read_file as read_table

__all__ = ["Column", "Row", "Table", "read_table", "table_error"]
