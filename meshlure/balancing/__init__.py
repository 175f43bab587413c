"""Balance from end to end: the ways found, flown and ranked, the one taken written and held against its promise."""
