"""Mending: what can be put right about a surface when asked, a step at a time, each with what it changed."""
