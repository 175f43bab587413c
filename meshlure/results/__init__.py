"""What a study of a bait hands on: the result tree of results.json, and the outlines to draw it with."""

from meshlure.results.study import DrawnPiece, Study, View

__all__ = ["DrawnPiece", "Study", "View"]
