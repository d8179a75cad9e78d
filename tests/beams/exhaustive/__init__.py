"""The search of a whole beam against trying every choice."""
