"""Placing ballast so that a bait rests as its maker wants, and cutting the room for it."""
