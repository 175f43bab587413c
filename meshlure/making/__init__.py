"""Meshes to make the bait from."""
