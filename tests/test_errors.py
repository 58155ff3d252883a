"""Errors are one family, read as plain lines, and survive the way between processes."""

import pickle

import pytest

from skychart.errors import ConfigError, InputError, OutputError, SkychartError


@pytest.mark.parametrize("kind", [InputError, ConfigError, OutputError])
def test_every_error_is_caught_as_one_of_ours(kind: type[SkychartError]) -> None:
    """One `except` in the command catches them all, and the text is the message."""
    with pytest.raises(SkychartError, match=r"^ozone is -1$"):
        raise kind("ozone is -1")


def test_wrong_values_are_value_errors() -> None:
    """Users of the Python interface may catch what they are used to; a full disk is no wrong value."""
    assert issubclass(InputError, ValueError)
    assert issubclass(ConfigError, ValueError)
    assert not issubclass(OutputError, ValueError)


def test_config_error_keeps_its_faults_apart() -> None:
    """A line each, from one text or from many, also after a pickle as between the processes of a build."""
    error = ConfigError(["first fault", "second fault"])
    assert error.faults == ("first fault", "second fault")
    assert str(error) == "first fault\nsecond fault"
    assert ConfigError("only fault").faults == ("only fault",)
    copy = pickle.loads(pickle.dumps(error))
    assert (copy.faults, str(copy)) == (error.faults, str(error))
