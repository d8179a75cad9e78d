"""Complete enumeration of small sections, the yardstick that the search is held against."""
