"""Weight, water and air: what acts on a bait."""
