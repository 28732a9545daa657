"""Settings of all tests."""

from hypothesis import settings

# a shared machine makes single examples slow, and no test here is about time
settings.register_profile("untimed", deadline=None)
settings.load_profile("untimed")
