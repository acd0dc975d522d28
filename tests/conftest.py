"""What holds for all tests."""

from hypothesis import settings

# no test asserts a time: a first call pays for imports and for the index of the data
settings.register_profile("untimed", deadline=None)
settings.load_profile("untimed")
