"""Workers that hang, die or eat memory cost one item."""

import os
import signal
import subprocess
import sys
import time

import pytest

from flatprep.base.workers import Caps, Lost, Pool


def work(item: object) -> object:
    if item == "hang":
        time.sleep(60)
    if item == "die":
        os._exit(9)
    if item == "eat":
        return len(bytearray(3_000_000_000))
    if item == "err":
        raise ValueError("no ring\nof three points")
    return ("done", item)


@pytest.mark.parametrize("jobs", [1, 3])
def test_results_come_in_order(jobs):
    pool = Pool(work, Caps(lambda item: 20.0), jobs)
    assert list(pool.run(range(12))) == [("done", k) for k in range(12)]


def test_hanging_and_dying_items_cost_themselves():
    pool = Pool(work, Caps(lambda item: 0.5 if item == "hang" else 20.0), 1)
    first, hung, died, last = pool.run([1, "hang", "die", 2])
    assert (first, last) == (("done", 1), ("done", 2))
    assert isinstance(hung, Lost)
    assert "more than" in hung.why
    assert isinstance(died, Lost)
    assert "worker" in died.why


def test_what_nobody_thought_of_costs_itself(capfd):
    first, odd, last = Pool(work, Caps(lambda item: 20.0), 1).run([1, "err", 2])
    assert (first, last) == (("done", 1), ("done", 2))
    assert odd == Lost("a mistake of this program (ValueError: no ring)", unforeseen=True)
    assert capfd.readouterr().err == ""


@pytest.mark.skipif(not os.path.exists("/proc/self/statm"), reason="this system caps no memory")
def test_memory_is_capped():
    assert isinstance(next(Pool(work, Caps(lambda item: 20.0, megabytes=500), 1).run(["eat"])), Lost)


def test_nothing_to_do():
    assert list(Pool(work, Caps(lambda item: 1.0), 2).run([])) == []


@pytest.mark.skipif(not hasattr(os, "kill") or os.name == "nt", reason="signals of POSIX")
def test_workers_end_when_their_parent_is_killed():
    code = (
        "import os, time\nfrom flatprep.base.workers import Caps, Pool\n"
        "def work(item):\n    os.write(1, f'{os.getpid()}\\n'.encode())\n    time.sleep(60)\n"
        "list(Pool(work, Caps(lambda item: 60.0), 3).run([1, 2, 3]))"
    )
    with subprocess.Popen([sys.executable, "-c", code], stdout=subprocess.PIPE, text=True) as parent:
        assert parent.stdout is not None
        assert len({parent.stdout.readline() for _ in range(3)}) == 3
        parent.kill()
        # the workers hold the other end of this pipe: it closes when the last of them has ended
        began = time.monotonic()
        parent.stdout.read()
    assert time.monotonic() - began < 20


@pytest.mark.skipif(not hasattr(signal, "pthread_sigmask"), reason="signals of POSIX")
def test_an_interruption_while_a_worker_is_started_is_not_lost():
    """It waits until the fork is over: what Python runs around it swallows exceptions."""
    seen = []

    def told(number, _frame):
        seen.append(number)

    def interrupted():
        os.kill(os.getpid(), signal.SIGTERM)
        seen.append("fork")

    os.register_at_fork(before=lambda: armed and armed.pop()())
    armed = [interrupted]
    before = signal.signal(signal.SIGTERM, told)
    try:
        assert list(Pool(work, Caps(lambda item: 20.0), 1).run([1])) == [("done", 1)]
    finally:
        signal.signal(signal.SIGTERM, before)
    assert armed == []
    assert seen == ["fork", signal.SIGTERM]
