"""Moulds: from a finished bait to the boards that silicone is poured over, with the study of how they part."""
