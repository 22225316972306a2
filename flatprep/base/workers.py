"""Work on many files in processes that can be stopped: one that hangs or eats memory costs itself, not the run."""

import gc
import multiprocessing
import os
import signal
import sys
import threading
import time
from collections.abc import Callable, Iterator, Sequence
from contextlib import contextmanager, nullcontext, suppress
from dataclasses import dataclass
from multiprocessing.connection import Connection, wait
from multiprocessing.context import SpawnProcess
from types import ModuleType
from typing import Any, Generic, TypeVar

_OBJECTS = 200_000
"""A worker looks for cycles after an item that has left more new objects than this."""
_ASKS = (signal.SIGINT, signal.SIGTERM)
_CAN_WAIT = hasattr(signal, "pthread_sigmask")
Item = TypeVar("Item")
Result = TypeVar("Result")


@dataclass(frozen=True, slots=True)
class Lost:
    """An item without a result, and why: its worker did not come back, or met what nobody had thought of."""

    why: str
    unforeseen: bool = False


@dataclass(frozen=True, slots=True)
class Caps:
    """What one item may cost.

    Attributes
    ----------
    seconds : callable
        Item -> wall time it may take.
    megabytes : float
        Memory a worker may take beyond what it had at its start; not enforced where the system knows no such limit.
    """

    seconds: Callable[[Any], float]
    megabytes: float = 1000.0


@dataclass(slots=True)
class _Worker:
    process: Any
    pipe: Connection
    index: int | None = None
    deadline: float = 0.0


class Pool(Generic[Item, Result]):
    """Runs a function on items in `jobs` processes; results come in the order of the items."""

    def __init__(self, work: Callable[[Item], Result], caps: Caps, jobs: int) -> None:
        self._work, self._caps, self._jobs = work, caps, max(1, jobs)
        methods = multiprocessing.get_all_start_methods()
        # a forked worker starts at once; its type depends on the system, so that mypy knows too little of it
        self._context: Any = multiprocessing.get_context("fork" if "fork" in methods else "spawn")

    def run(self, items: Sequence[Item]) -> Iterator[Result | Lost]:
        """Yield a result, or `Lost`, for each item."""
        done: dict[int, Result | Lost] = {}
        todo = iter(range(len(items)))
        workers: list[_Worker] = []
        nxt = 0
        try:
            for _ in range(min(self._jobs, len(items))):
                workers.append(self._start())
                self._give(workers[-1], todo, items)
            while nxt < len(items):
                while nxt in done:
                    yield done.pop(nxt)
                    nxt += 1
                if nxt < len(items):
                    self._turn(workers, done, todo, items)
        finally:
            for worker in workers:
                self._stop(worker)

    def _turn(
        self, workers: list[_Worker], done: dict[int, Result | Lost], todo: Iterator[int], items: Sequence[Item]
    ) -> None:
        busy = [w for w in workers if w.index is not None]
        pause = max(0.0, min(w.deadline for w in busy) - time.monotonic())
        ready = set(wait([w.pipe for w in busy], timeout=pause))
        for k, worker in enumerate(workers):
            index = worker.index
            if index is None:
                continue
            if worker.pipe in ready:
                try:
                    done[index] = worker.pipe.recv()
                except (EOFError, OSError):
                    done[index] = Lost("it brought its worker down")
                    worker = workers[k] = self._restart(worker)
            elif time.monotonic() >= worker.deadline:
                done[index] = Lost(f"it took more than {self._caps.seconds(items[index]):.0f} s")
                worker = workers[k] = self._restart(worker)
            else:
                continue
            self._give(worker, todo, items)

    def _give(self, worker: _Worker, todo: Iterator[int], items: Sequence[Item]) -> None:
        worker.index = next(todo, None)
        if worker.index is not None:
            worker.deadline = time.monotonic() + self._caps.seconds(items[worker.index])
            worker.pipe.send(items[worker.index])

    def _start(self) -> _Worker:
        mine, theirs = self._context.Pipe()
        process = self._context.Process(target=_serve, args=(theirs, self._work, self._caps.megabytes), daemon=True)
        start(process)
        theirs.close()
        return _Worker(process, mine)

    def _restart(self, worker: _Worker) -> _Worker:
        self._stop(worker)
        return self._start()

    @staticmethod
    def _stop(worker: _Worker) -> None:
        worker.pipe.close()
        worker.process.kill()
        worker.process.join()


def start(process: Any) -> None:
    """Start a worker process whose target calls `become_worker`.

    A worker that begins as a Python of its own (``spawn``) does not import the caller's script, of which it needs
    nothing: one without the usual guard would run from its beginning in every worker.

    Raises
    ------
    OSError
        When the system gives no process.
    """
    with _undisturbed(), _without_script() if isinstance(process, SpawnProcess) else nullcontext():
        process.start()


@contextmanager
def _without_script() -> Iterator[None]:
    """Let multiprocessing find a main module that is of no file, as at Python's prompt."""
    script = sys.modules["__main__"]
    sys.modules["__main__"] = ModuleType("__main__")
    try:
        yield
    finally:
        sys.modules["__main__"] = script


@contextmanager
def _undisturbed() -> Iterator[None]:
    """Let interruptions wait: what Python itself runs around a fork swallows the exception that they raise."""
    if not _CAN_WAIT:
        yield
        return
    before = signal.pthread_sigmask(signal.SIG_BLOCK, _ASKS)
    try:
        yield
    finally:
        signal.pthread_sigmask(signal.SIG_SETMASK, before)


def become_worker() -> None:
    """Leave interruptions to the parent of this process, and end when it ends, however it does.

    Without this a worker in the middle of its work outlives a parent that was killed.
    """
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    signal.signal(signal.SIGTERM, signal.SIG_DFL)
    if _CAN_WAIT:
        signal.pthread_sigmask(signal.SIG_UNBLOCK, _ASKS)
    parent = multiprocessing.parent_process()
    if parent is not None:
        threading.Thread(target=_end_after, args=(parent.sentinel,), daemon=True).start()


def _end_after(sentinel: int) -> None:
    wait([sentinel])
    os._exit(1)


def _serve(pipe: Connection, work: Callable[[Any], Any], megabytes: float) -> None:
    become_worker()
    _cap_memory(megabytes)
    # reading a drawing makes many objects and hardly a cycle: looking for cycles all the time costs a tenth
    gc.disable()
    gc.freeze()
    while True:
        try:
            item = pipe.recv()
        except (EOFError, OSError):
            return
        try:
            answer = work(item)
        except MemoryError:
            answer = Lost(f"it takes more than {megabytes:.0f} MB of memory")
        except Exception as err:  # whatever it is costs this item, not the run
            first = next(iter(str(err).splitlines()), "")
            answer = Lost(f"a mistake of this program ({type(err).__name__}: {first})", unforeseen=True)
        with suppress(BrokenPipeError):
            pipe.send(answer)
        del item, answer
        if gc.get_count()[0] > _OBJECTS:
            gc.collect()


def _cap_memory(megabytes: float) -> None:
    try:
        import resource
    except ImportError:  # not a system that has it
        return
    with suppress(OSError, ValueError, IndexError):
        with open("/proc/self/statm") as pages:
            now = int(pages.read().split()[0]) * resource.getpagesize()
        resource.setrlimit(resource.RLIMIT_AS, (int(now + megabytes * 1e6), resource.RLIM_INFINITY))
