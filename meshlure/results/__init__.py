"""What a study of a bait hands on: the result tree of results.json, its schema, and the outlines to draw it with."""

from meshlure.results.contract import inspection_schema, schema
from meshlure.results.study import DrawnPiece, Scene, ScenePiece, Study, View

__all__ = ["DrawnPiece", "Scene", "ScenePiece", "Study", "View", "inspection_schema", "schema"]
