"""The same examples in every run, however slow the machine."""

from hypothesis import settings

settings.register_profile("repeatable", deadline=None, derandomize=True, max_examples=50)
settings.load_profile("repeatable")
