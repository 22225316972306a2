"""Sheets refilled in several processes."""

import numpy as np
import pytest

from flatprep.nest.clock import Clock
from flatprep.nest.firstfit import answer_of
from flatprep.nest.group import prepare_group
from flatprep.nest.keep import left_to_lay
from flatprep.nest.refill import worth_refilling
from flatprep.nest.refill_jobs import Job, Message, Others, refill_with
from flatprep.nest.shapes import Place
from tests.nest.parts import ask, item, rectangle, sheet

SIDES = (70.0, 30.0, 60.0, 40.0)


def wasteful():
    """Four strips of a sheet's length, each on a sheet of its own; two sheets hold them."""
    strips = [item(rectangle(f"strip {n}", 100.0, side), turns_deg=(0.0,)) for n, side in enumerate(SIDES)]
    question = ask(strips, (sheet(100.0, 100.0, count=None),))
    group = prepare_group(*left_to_lay(question), question)
    places = [Place(n, n, 0.0, False, 50.0, side / 2.0) for n, side in enumerate(SIDES)]
    return answer_of(group, places, (0, 0, 0, 0), 0.0)


@pytest.mark.parametrize("jobs", [1, 2])
def test_fewer_sheets_with_any_number_of_processes(jobs):
    found = []
    refill_with(wasteful(), 0.0, Clock(60.0), 1, found.append, jobs)
    best = min(found, key=lambda a: a.value)
    assert len(best.supply) == 2
    fills = [sum(SIDES[p.shape] for p in best.places if p.container == n) for n in range(2)]
    assert np.allclose(fills, 100.0)


def test_same_steps_same_answer():
    def best():
        found = []
        refill_with(wasteful(), 0.0, Clock(steps=30), 3, found.append, 2)
        return min(found, key=lambda a: a.value).places

    assert best() == best()


class Pipe:
    """A worker's pipe with messages in it."""

    def __init__(self, *messages):
        self._messages = list(messages)

    def poll(self, _pause):
        return bool(self._messages)

    def recv(self):
        message = self._messages.pop(0)
        if message is None:
            raise EOFError
        return message


def test_workers_answers_are_told_and_their_end_is_seen():
    one, told = wasteful(), []
    two = (Place(0, 0, 0.0, False, 50.0, 35.0), Place(1, 0, 0.0, False, 50.0, 85.0))
    two += (Place(2, 1, 0.0, False, 50.0, 30.0), Place(3, 1, 0.0, False, 50.0, 80.0))
    still, ended, gone = Pipe(Message(two, (0, 0))), Pipe(Message((), (), last=True)), Pipe(None)
    others = Others([still, ended, gone], Job(one, 0.0, 0.0, None, 1), told.append)
    assert not others.is_least
    assert others.look()
    assert [len(a.supply) for a in told] == [2]
    assert others.is_least
    assert not worth_refilling(told[0])
    assert not Others([ended], Job(one, 0.0, 0.0, None, 1), told.append).look() or not ended.poll(0)
