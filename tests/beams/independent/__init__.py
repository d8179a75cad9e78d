"""A checker of whole beams with a code path of its own, and the random jobs it is run on."""
