"""Ball chambers from end to end: ways found, tried and ranked, the one taken written and held against its promise."""
