"""Settings that hold for every test."""

from hypothesis import settings

# The first example of a property may pay for an import of a second, and other work may share the machine.
settings.register_profile("no deadline", deadline=None)
settings.load_profile("no deadline")
