"""Every error that this package raises on purpose; each message is what a user reads, without a traceback."""

from collections.abc import Iterable


class SkychartError(Exception):
    """Base of all errors raised on purpose; `str()` gives one clear line."""


class InputError(SkychartError, ValueError):
    """An argument or option is wrong; the message names it, the value seen and what is accepted."""


class ConfigError(SkychartError, ValueError):
    """Settings are wrong; `faults` holds one line for each fault, and `str()` joins them with line breaks."""

    def __init__(self, faults: str | Iterable[str]) -> None:
        self.faults: tuple[str, ...] = (faults,) if isinstance(faults, str) else tuple(faults)
        super().__init__("\n".join(self.faults))

    def __reduce__(self) -> tuple[type["ConfigError"], tuple[tuple[str, ...]]]:
        """Travel between processes with the separate faults, not with their joined text."""
        return type(self), (self.faults,)


class OutputError(SkychartError):
    """Output cannot be written, or writing would replace a folder that this package did not make."""
