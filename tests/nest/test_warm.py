"""Compiling aside: the whole search is compiled there, and who waits for it can be stopped."""

import os
import subprocess
import sys

import pytest

from flatprep.nest import _jit, warm

needs_compiler = pytest.mark.skipif(not _jit.JIT, reason="kernels run as plain Python")


def python(script, **environment):
    run = subprocess.run(
        [sys.executable, "-c", script], capture_output=True, text=True, env=os.environ | environment, check=False
    )
    assert run.returncode == 0, run.stderr
    return run.stdout


@needs_compiler
def test_all_kernels_are_compiled_aside():
    """After that, a nest of shapes with windows, turns and several sheets, one of them irregular, asks for no more."""
    said = python("""
from flatprep.nest import warm
warm.compile_rows()
warm.compile_search()
from numba.core import event
asked = []
class Listener(event.Listener):
    def on_start(self, happened): asked.append(happened.data["dispatcher"].py_func.__name__)
    def on_end(self, happened): pass
event.register("numba:compile", Listener())
import numpy as np
from flatprep.nest.clock import Clock
from flatprep.nest.construct import Bin, Layer
from flatprep.nest.search import search, sheets_task
from flatprep.nest.shapes import Container, Shape
square = np.array([[0.0, 0.0], [10.0, 0.0], [10.0, 10.0], [0.0, 10.0]])
hook = np.array([[0.0, 0.0], [30.0, 0.0], [30.0, 8.0], [9.0, 9.0], [8.0, 30.0], [0.0, 30.0]])
shapes = [Shape(hook, turns_deg=None, mirror=(False, True), count=5),
          Shape(4.0 * square, (square[::-1] + 15.0,), (0.0, 90.0), count=4), Shape(square, count=6)]
room = Container(10.0 * square)
cut_off = Container(np.array([[0.0, 0.0], [100.0, 0.0], [100.0, 100.0], [50.0, 100.0]]), (square + 60.0,))
Layer(shapes, [Bin(room, (None, (0.0,), None)), Bin(cut_off, (None,) * 3)]).lay([0] * 5 + [1] * 4 + [2] * 6, [0, 1])
task = sheets_task(shapes, [room] * 4, None)
search(task, Clock(steps=40), 1, lambda best: None)
print(asked)
""")
    assert said.strip() == "[]"


@needs_compiler
def test_whoever_waits_can_be_stopped(tmp_path):
    """With nothing compiled yet, that takes many seconds; the wait ends when it is asked to."""
    said = python(
        """
import time
from flatprep.nest import warm
assert not warm.is_compiled(warm.ROWS)
class Told(set):
    def update(self, what, **_): self.add(what)
told, began = Told(), time.monotonic()
with warm.compiling(told) as compiler:
    compiler.wait(warm.ROWS, began + 60.0, lambda: time.monotonic() > began + 0.5)
    print(time.monotonic() - began)
    compiler.wait(warm.SEARCH, time.monotonic() + 0.2)
print(time.monotonic() - began)
assert told == {"compiling for this machine, the first time only"}, told
""",
        NUMBA_CACHE_DIR=str(tmp_path),
    )
    stopped, ended = map(float, said.split())
    assert 0.5 <= stopped < 2.0
    assert 0.7 <= ended < 3.0


@needs_compiler
def test_what_is_compiled_is_not_compiled_again(tmp_path, monkeypatch):
    monkeypatch.setattr(warm, "_note", lambda stage: tmp_path / stage)
    notes = [tmp_path / stage for stage in warm.STAGES]
    for note in notes:
        assert not warm.is_compiled(note.name)
        note.write_text(warm._state())
        assert warm.is_compiled(note.name)
    monkeypatch.setattr(warm, "start", lambda process: pytest.fail("a process was started"))
    with warm.compiling() as compiler:
        compiler.wait(warm.SEARCH)
    notes[0].write_text(warm._state() + " of yesterday")
    assert not warm.is_compiled(notes[0].name)


@needs_compiler
def test_without_a_process_to_be_had_nothing_is_waited_for(tmp_path, monkeypatch):
    monkeypatch.setattr(warm, "_note", lambda stage: tmp_path / stage)

    def none_left(_process):
        raise OSError("no more processes")

    monkeypatch.setattr(warm, "start", none_left)
    with warm.compiling() as compiler:
        compiler.wait(warm.ROWS)
