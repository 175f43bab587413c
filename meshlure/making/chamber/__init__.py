"""Chambers for balls: where a straight bore fits into a body, what its balls do, and the meshes to make it from."""
