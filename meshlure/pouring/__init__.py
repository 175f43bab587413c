"""Pouring from end to end: the mix of a casting or the wall and infill of a print, and the bait that comes of it."""
