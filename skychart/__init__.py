"""Reference charts of the colour of the sky, computed from scattering in a spherical atmosphere."""

__version__ = "0.1.0"
