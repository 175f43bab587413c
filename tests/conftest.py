"""Lets every test import `shapes`, and makes property tests repeatable."""

from hypothesis import settings

settings.register_profile("repeatable", derandomize=True, deadline=None, max_examples=25, print_blob=False)
settings.load_profile("repeatable")
