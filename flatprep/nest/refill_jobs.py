"""Refilling in several processes, each with a seed of its own; the best of what they find counts."""

import math
import multiprocessing
import time
from collections.abc import Callable, Sequence
from multiprocessing.connection import Connection
from typing import NamedTuple

from flatprep.base.workers import become_worker, start
from flatprep.nest.clock import Clock
from flatprep.nest.firstfit import Answer, answer_of
from flatprep.nest.parallel import LAST_WORD_S, PAUSE_S, SEED_STRIDE
from flatprep.nest.refill import refill, worth_refilling
from flatprep.nest.shapes import Place

Found = Callable[[Answer], None]


class Message(NamedTuple):
    """From a worker: a better answer, or, at its end, none."""

    places: tuple[Place, ...]
    supply: tuple[int, ...]
    last: bool = False


class Job(NamedTuple):
    """What a worker begins with; wall time ends at an epoch second."""

    answer: Answer
    margin_mm: float
    ends_at: float
    steps: int | None
    seed: int


def work(job: Job, hub: Connection) -> None:
    """Refill in a worker process; its answers go to the hub."""
    become_worker()
    clock = Clock(max(job.ends_at - time.time(), 0.0), job.steps)
    try:
        refill(
            job.answer, job.margin_mm, clock, job.seed, lambda better: hub.send(Message(better.places, better.supply))
        )
        hub.send(Message((), (), last=True))
    except OSError:  # the hub is gone
        return
    finally:
        hub.close()


class Others:
    """What the workers have found, told as it is read."""

    def __init__(self, pipes: Sequence[Connection], job: Job, found: Found) -> None:
        self._working, self._job, self._found = list(pipes), job, found
        self.is_least = False

    def look(self, pause_s: float = 0.0) -> bool:
        """Read what has come; tell whether some worker is still at work."""
        for pipe in self._working[:]:
            try:
                while pipe in self._working and pipe.poll(pause_s):
                    self._take(pipe, pipe.recv())
            except (EOFError, OSError):  # it ended early
                self._working.remove(pipe)
        return bool(self._working)

    def _take(self, pipe: Connection, message: Message) -> None:
        if message.last:
            self._working.remove(pipe)
            return
        better = answer_of(self._job.answer.group, message.places, message.supply, self._job.margin_mm)
        self.is_least = self.is_least or not worth_refilling(better)
        self._found(better)


def refill_with(answer: Answer, margin_mm: float, clock: Clock, seed: int, found: Found, jobs: int) -> None:
    """Refill with so many processes, this one among them.

    Parameters
    ----------
    answer, margin_mm, clock, seed, found
        As of `refill`; with a budget in steps each process has it, and `found` is told of the workers' answers in
        their order when all have ended, so that the result does not depend on the clock.
    """
    if jobs <= 1:
        refill(answer, margin_mm, clock, seed, found)
        return
    context = multiprocessing.get_context("spawn")
    pipes = [context.Pipe() for _ in range(jobs - 1)]
    job = Job(answer, margin_mm, time.time() + clock.seconds - clock.elapsed_s, clock.steps, seed)
    workers = [
        context.Process(target=work, args=(job._replace(seed=seed + k * SEED_STRIDE), far), daemon=True)
        for k, (_, far) in enumerate(pipes, start=1)
    ]
    try:
        for worker, (_, far) in zip(workers, pipes, strict=True):
            start(worker)
            far.close()
        _beside(Others([near for near, _ in pipes], job, found), job, clock, found)
    finally:
        for worker in workers:
            if worker.pid is not None:  # it was started
                worker.kill()
                worker.join()


def _beside(others: Others, job: Job, clock: Clock, found: Found) -> None:
    """Refill in this process while the others do, and hear them out."""
    by_steps = clock.steps is not None

    def stopped() -> bool:
        if not by_steps:
            others.look()
        return clock.stopped() or others.is_least

    mine = Clock(clock.seconds - clock.elapsed_s, clock.steps, stop=stopped)
    best = [job.answer]

    def note(better: Answer) -> None:
        best.append(better)
        found(better)

    refill(job.answer, job.margin_mm, mine, job.seed, note)
    clock.spend(mine.evaluations)
    until = math.inf if by_steps else time.monotonic() + LAST_WORD_S
    while worth_refilling(best[-1]) and not stopped() and time.monotonic() < until and others.look(PAUSE_S):
        pass
