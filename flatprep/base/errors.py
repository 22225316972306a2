"""The errors that reach a person: what is wrong, where, and what to do."""

from enum import IntEnum


class ExitStatus(IntEnum):
    """What a command ends with."""

    CLEAN = 0
    FINDINGS = 1
    UNUSABLE = 2


class FlatprepError(Exception):
    """Something a person must mend before the work can go on.

    Parameters
    ----------
    message
        What is wrong and where, one line, without a full stop.
    remedy
        What to do about it; empty when the message says it all.
    """

    exit_status = ExitStatus.UNUSABLE

    def __init__(self, message: str, remedy: str = "") -> None:
        super().__init__(message)
        self.message = message
        self.remedy = remedy


class UsageError(FlatprepError):
    """An option or argument that cannot be used."""


class DrawingError(FlatprepError):
    """A drawing that cannot be read at all."""


class JobError(FlatprepError):
    """A job file or cut list with a mistake: the message names file, key and value."""


class ProfileError(FlatprepError):
    """A profile that is missing or wrong: the message names file, key and value."""


class OutputError(FlatprepError):
    """A result that cannot be written where it was asked for."""
