"""The sections of the bait file, one a file: what it holds in SI, and how it is read from its keys."""
