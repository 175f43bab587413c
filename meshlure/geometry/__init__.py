"""Surfaces and solids, knowing of no bait."""
