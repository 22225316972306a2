"""Several searches of one task at once: processes with seeds of their own that meet at fixed counts of steps.

Process 0 is the caller's. At each meeting every process hands in its best layout and gets the best of all back; a
process that has used up its budget hands in its last one and no longer takes part. Messages that only show progress
change nothing in the search, so a budget in steps gives the same result every time.
"""

import math
import multiprocessing
import time
from collections.abc import Callable, Sequence
from multiprocessing.connection import Connection, wait
from typing import NamedTuple

import numpy as np

from flatprep.base.workers import become_worker, start
from flatprep.nest.clock import EVALUATIONS_A_STEP, Clock
from flatprep.nest.engine import Spots
from flatprep.nest.solo import run
from flatprep.nest.task import Task

MEETING_STEPS = 1000
# The processes' clocks end together; how long the last word of another process is waited for.
LAST_WORD_S = 0.5
# Whether the search is to stop is asked this often while waiting for others.
PAUSE_S = 0.1
# A worker shows progress no oftener than this.
PROGRESS_S = 0.5
SEED_STRIDE = 7919


class Message(NamedTuple):
    """From a worker: ``found`` (progress), ``meet`` (waits for the answer) or ``done``."""

    kind: str
    spots: Spots


class Job(NamedTuple):
    """What a worker needs to start: the task, its seed, and what it may spend (wall time ends at an epoch second)."""

    task: Task
    seed: int
    ends_at: float
    steps: int | None
    meeting_steps: int


class Meetings:
    """When a process meets the others: a check in the search that mostly does nothing."""

    def __init__(
        self, clock: Clock, steps: int, meet: Callable[[Spots], Spots], look: Callable[[], None] = lambda: None
    ) -> None:
        self._clock, self._meet, self._look = clock, meet, look
        self._every = self._next = steps * EVALUATIONS_A_STEP

    def __call__(self, best: Spots) -> Spots:
        """Look for news, and meet as often as is due."""
        self._look()
        while self._clock.evaluations >= self._next:
            self._next += self._every
            other = self._meet(best)
            best = other if other.cost < best.cost else best
        return best


class Hub:
    """Process 0's side: the workers still at work, what they wait for, and the last word of those that are done."""

    def __init__(
        self, workers: Sequence[Connection], show: Callable[[Spots], None], clock: Clock | None = None
    ) -> None:
        self._clock = clock or Clock(seconds=math.inf)
        self._working = list(workers)
        self._waiting: dict[Connection, Spots] = {}
        self._last: list[Spots] = []
        self._show = show

    def look(self) -> None:
        """Read what has come, without waiting."""
        for worker in list(self._working):
            while worker in self._working and worker not in self._waiting and worker.poll():
                self._read(worker)

    def meet(self, best: Spots) -> Spots:
        """Wait until every worker wants to meet or is done; tell all of them the best, and return it."""
        for worker in list(self._working):
            while worker in self._working and worker not in self._waiting:
                if worker.poll(PAUSE_S):
                    self._read(worker)
                elif self._clock.stopped() or (self._clock.steps is None and self._clock.passed()):
                    return self._best_with(best)
        best = self._best_with(best)
        self._answer(best)
        return best

    def end(self, best: Spots, until: float) -> Spots:
        """Let the workers finish, until a time (monotonic s) at most or a stop; return the best of all."""
        while self._working:
            best = self._best_with(best)
            self._answer(best)
            ready = wait(self._working, PAUSE_S)
            if not ready and (time.monotonic() >= until or self._clock.stopped()):
                break
            for worker in self._working[:]:
                if worker in ready:
                    self._read(worker)
        return self._best_with(best)

    def _best_with(self, best: Spots) -> Spots:
        return min([best, *self._waiting.values(), *self._last], key=lambda s: s.cost)

    def _answer(self, best: Spots) -> None:
        for worker in self._waiting:
            if worker in self._working:
                worker.send(best)
        self._waiting.clear()

    def _read(self, worker: Connection) -> None:
        """Take in a worker's next message, waiting for it."""
        try:
            message: Message = worker.recv()
        except (EOFError, OSError):  # it ended early; its pipe tells no more
            self._working.remove(worker)
            return
        self._show(message.spots)
        if message.kind == "meet":
            self._waiting[worker] = message.spots
        elif message.kind == "done":
            self._last.append(message.spots)
            self._working.remove(worker)


def work(job: Job, hub: Connection) -> None:
    """Search in a worker process; its results go to the hub."""
    become_worker()
    clock = Clock(max(job.ends_at - time.time(), 0.0), job.steps)
    said = [-np.inf]

    def found(spots: Spots) -> None:
        if clock.elapsed_s > said[0] + PROGRESS_S:
            said[0] = clock.elapsed_s
            hub.send(Message("found", spots))

    def meet(best: Spots) -> Spots:
        hub.send(Message("meet", best))
        answer: Spots = hub.recv()
        return answer

    try:
        hub.send(Message("done", run(job.task, clock, job.seed, found, Meetings(clock, job.meeting_steps, meet))))
    except (EOFError, OSError):  # process 0 is gone
        return
    finally:
        hub.close()


def run_jobs(
    task: Task,
    clock: Clock,
    seed: int,
    found: Callable[[Spots], None],
    jobs: int,
    meeting_steps: int = MEETING_STEPS,
) -> Spots:
    """Search with several processes, this one among them; `found` is told of each better layout of any of them."""
    context = multiprocessing.get_context("spawn")
    pipes = [context.Pipe() for _ in range(jobs - 1)]
    job = Job(task, seed, time.time() + clock.seconds - clock.elapsed_s, clock.steps, meeting_steps)
    workers = [
        context.Process(target=work, args=(job._replace(seed=seed + k * SEED_STRIDE), far), daemon=True)
        for k, (_, far) in enumerate(pipes, start=1)
    ]
    try:
        for worker, (_, far) in zip(workers, pipes, strict=True):
            start(worker)
            far.close()
        hub = Hub([near for near, _ in pipes], found, clock)
        best = run(task, clock, seed, found, Meetings(clock, meeting_steps, hub.meet, hub.look))
        return hub.end(best, math.inf if clock.steps is not None else time.monotonic() + LAST_WORD_S)
    finally:
        for worker in workers:
            if worker.pid is not None:  # it was started
                worker.kill()
                worker.join()
