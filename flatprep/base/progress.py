"""How long work tells how far it is: a protocol, so that nothing below the command line knows a terminal."""

from typing import Protocol


class Progress(Protocol):
    """Receives a short line now and then; must be cheap."""

    def update(self, what: str, *, done: float | None = None, total: float | None = None) -> None:
        """Say what is being done; `done` of `total` where that is known."""


class Silent:
    """Progress that nobody looks at."""

    def update(self, what: str, *, done: float | None = None, total: float | None = None) -> None:
        """Do nothing."""
