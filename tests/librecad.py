"""LibreCAD opens a drawing and saves it under another name, on a screen that nobody sees.

Its console tool prints to PDF only; so a virtual screen (Xvfb) and keys (xdotool) go through its own menu: File, Save
as. What it then writes is its own DXF of what it has read.
"""

import os
import shutil
import subprocess
import time
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from pathlib import Path

NEEDED = ("librecad", "Xvfb", "xdotool")
START_S, ANSWER_S, TRIES = 60.0, 5.0, 6


def missing() -> list[str]:
    """Programs that are not installed."""
    return [name for name in NEEDED if shutil.which(name) is None]


class LibreCad:
    """Saves drawings anew, each with a LibreCAD of its own.

    Parameters
    ----------
    display
        Of the virtual screen, ``:7``.
    home
        Folder for its settings.
    """

    def __init__(self, display: str, home: Path) -> None:
        settings = home / ".config" / "LibreCAD" / "LibreCAD.conf"
        settings.parent.mkdir(parents=True)
        settings.write_text("[Startup]\nFirstLoad=0\n")
        self._environment = {
            **os.environ, "DISPLAY": display, "HOME": str(home), "XDG_CONFIG_HOME": str(home / ".config"),
            "XDG_RUNTIME_DIR": str(home), "QT_QPA_PLATFORM": "xcb", "LC_ALL": "C.UTF-8",
        }  # fmt: skip

    def save_as(self, drawing: Path, saved: Path) -> None:
        """Open `drawing` and save it as `saved`, which is not there yet."""
        with subprocess.Popen(
            ["librecad", drawing], env=self._environment, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL
        ) as process:
            try:
                self._await(lambda: self._window(drawing.name), START_S)
                for _ in range(TRIES):
                    if self._tried(drawing, saved):
                        return
                raise AssertionError(f"LibreCAD has not saved {drawing} as {saved}")
            finally:
                process.kill()

    def _tried(self, drawing: Path, saved: Path) -> bool:
        self._xdotool("windowfocus", self._window(drawing.name))
        self._xdotool("key", "Escape", "alt+f")
        time.sleep(0.5)
        self._xdotool("key", "a")
        if not self._await(lambda: self._window("Save Drawing As"), ANSWER_S):
            return False
        self._xdotool("windowfocus", self._window("Save Drawing As"))
        self._xdotool("type", "--delay", "15", str(saved))
        self._xdotool("key", "Return")
        return bool(self._await(lambda: saved.exists() and saved.read_text().rstrip().endswith("EOF"), ANSWER_S))

    def _window(self, title: str) -> str:
        """Window whose title has that text; empty where there is none."""
        return self._xdotool("search", "--onlyvisible", "--name", title).split("\n")[0]

    def _xdotool(self, *words: str) -> str:
        run = subprocess.run(["xdotool", *words], env=self._environment, capture_output=True, text=True, check=False)
        return run.stdout

    @staticmethod
    def _await(seen: Callable[[], object], seconds: float) -> object:
        until = time.monotonic() + seconds
        while not (found := seen()) and time.monotonic() < until:
            time.sleep(0.1)
        return found


@contextmanager
def screen() -> Iterator[str]:
    """Name of a virtual screen."""
    read, write = os.pipe()
    command = ["Xvfb", "-displayfd", str(write), "-screen", "0", "1280x1024x24", "-nolisten", "tcp"]
    with subprocess.Popen(command, pass_fds=[write], stderr=subprocess.DEVNULL) as process:
        os.close(write)
        try:
            with os.fdopen(read) as said:
                yield f":{said.readline().strip()}"
        finally:
            process.terminate()
