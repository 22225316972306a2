"""Compile the kernels in a process of its own: whoever waits for that can still be stopped.

The first nest after an installation compiles for many seconds, much of it in calls that no signal interrupts and that
do not take an exception well. The code is kept on disk (`flatprep.nest._jit`); notes beside it tell what is there.
"""

import multiprocessing
import platform
import time
from collections.abc import Callable, Iterator, Mapping
from contextlib import contextmanager, suppress
from dataclasses import replace
from math import inf
from pathlib import Path
from typing import Any

import numpy as np

from flatprep.base.progress import Progress, Silent
from flatprep.base.workers import become_worker, start
from flatprep.nest import _jit
from flatprep.nest.board import settle_all
from flatprep.nest.clock import Clock
from flatprep.nest.construct import Bin, Layer
from flatprep.nest.engine import Engine
from flatprep.nest.shapes import Container, Shape
from flatprep.nest.task import strip_task

PAUSE_S = 0.05
SQUARE = np.array([[0.0, 0.0], [10.0, 0.0], [10.0, 10.0], [0.0, 10.0]])
ROWS, SEARCH = "rows", "search"
"""What is compiled, in the order in which it is needed: the constructive rule, the search."""


class Compiler:
    """Waits for compiled code; none is waited for where all of it is there or none can be made aside."""

    def __init__(self, process: Any = None, progress: Progress | None = None) -> None:
        self._process, self._progress = process, Silent() if progress is None else progress

    def wait(self, stage: str, until: float = inf, stop: Callable[[], bool] = lambda: False) -> None:
        """Wait for the code of a stage, until a time (monotonic s) at most or until asked to stop."""
        if self._process is None:
            return
        note = _state()
        while self._process.is_alive() and not _is_noted(stage, note) and time.monotonic() < until and not stop():
            self._progress.update("compiling for this machine, the first time only")
            self._process.join(PAUSE_S)


@contextmanager
def compiling(progress: Progress | None = None) -> Iterator[Compiler]:
    """Begin to compile what is not compiled yet; `progress` is told while somebody waits.

    The process that compiles ends with the block; what it has compiled by then is kept. Whoever does not wait for it
    compiles for himself.
    """
    if not _jit.JIT or all(map(is_compiled, STAGES)) or multiprocessing.current_process().daemon:
        yield Compiler()
        return
    process = multiprocessing.get_context("spawn").Process(target=_compile_apart, daemon=True)
    try:
        start(process)
    except OSError:  # no process to be had
        yield Compiler()
        return
    try:
        yield Compiler(process, progress)
    finally:
        process.kill()
        process.join()


def is_compiled(stage: str) -> bool:
    """Tell whether all kernels of a stage have been compiled for this machine."""
    return _is_noted(stage, _state())


def compile_rows() -> None:
    """Make the constructive rule call every kernel it has: two squares in a square, beside a third."""
    bins = [Bin(Container(3.0 * SQUARE), ((0.0, 90.0),), (SQUARE,))]
    Layer([Shape(SQUARE, count=2)], bins).lay([0, 0], [0])


def compile_search() -> None:
    """Make the search call every kernel it has: two squares, one upon the other, one of them turned askew."""
    task = strip_task([Shape(SQUARE, turns_deg=None, count=2)], 25.0, None)
    engine = Engine(task.outlines, task.free, task.field, task.start, Clock(steps=1), np.random.default_rng(0))
    engine.lay(replace(task.start, turn=np.array([0.0, 30.0]), at=np.zeros((2, 2))))
    engine.untangle(1, 1)
    engine.is_free()


STAGES: Mapping[str, Callable[[], None]] = {ROWS: compile_rows, SEARCH: compile_search}


def _compile_apart() -> None:
    become_worker()
    for stage, work in STAGES.items():
        work()
        with suppress(OSError):  # a folder that cannot be written to: it will be compiled again
            _note(stage).write_text(_state())


def _is_noted(stage: str, state: str) -> bool:
    with suppress(OSError):
        return _note(stage).read_text() == state
    return False


def _note(stage: str) -> Path:
    folder: str = settle_all.stats.cache_path  # type: ignore[attr-defined]
    return Path(folder) / f"{stage}.compiled"


def _state() -> str:
    """Say what compiled code depends on: the kernels' sources, the compiler, Python and the processor."""
    import llvmlite.binding
    import numba

    cpu = llvmlite.binding.get_host_cpu_name()
    return f"{_jit.sources_digest()} numba {numba.__version__} Python {platform.python_version()} {cpu}"
