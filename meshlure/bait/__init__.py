"""The bait: its pieces, how they lie to each other, and what they make together."""
