"""Runs that are interrupted: what they have is written whole, what they have not leaves the folder as it was."""

import ctypes
import json
import signal
import subprocess
import sys
import time
from contextlib import suppress

import pytest
from click.testing import CliRunner

from flatprep import api
from flatprep.api.nest import nest_ask
from flatprep.cli import main
from flatprep.cli.interrupt import Stop, answer_interruptions, stoppable
from flatprep.nest.verify import verify
from tests.cli.test_jobs import JOB, leaf
from tests.damage import half_written
from tests.drawing.draw import drawn


@pytest.fixture
def job(tmp_path):
    """A job of which the search is never done."""
    drawn(tmp_path, leaf)
    path = tmp_path / "job.toml"
    path.write_text(
        JOB.replace("quantity = 4", "quantity = 9")
        .replace("length = 300", 'length = "open"')
        .replace("per_sheet", "per_metre")
    )
    return path


def started(job, *more):
    words = ["nest", str(job), "--out", str(job.parent / "out"), "--seconds", "300", *more]
    return subprocess.Popen([sys.executable, "-m", "flatprep", *words], stderr=subprocess.PIPE, text=True)


@pytest.mark.parametrize(("number", "jobs"), [(signal.SIGINT, "1"), (signal.SIGTERM, "2")])
def test_the_best_layout_so_far_is_written(job, number, jobs):
    with started(job, "--jobs", jobs) as run:
        time.sleep(6.0)
        run.send_signal(number)
        # reading ends when the last process that holds it has ended: no worker is left behind
        _, err = run.communicate(timeout=60)
    assert run.returncode == 128 + number, err
    assert half_written(job.parent / "out") == []
    if not (job.parent / "out" / "layout.json").exists():
        pytest.skip("this machine is too slow for a first layout in 6 s")
    layout = api.stored_layout(job.parent / "out" / "layout.json")
    assert verify(layout, nest_ask(api.read_job(api.load_job(job)))) == ()


def test_before_there_is_a_layout_the_folder_stays_as_it_was(job):
    out = job.parent / "out"
    out.mkdir()
    (out / "layout.json").write_text(json.dumps({"old": 1}))
    with started(job) as run:
        time.sleep(0.3)
        run.send_signal(signal.SIGTERM)
        _, err = run.communicate(timeout=60)
    assert run.returncode in (143, -signal.SIGTERM)
    assert "Traceback" not in err
    assert json.loads((out / "layout.json").read_text()) == {"old": 1}


def test_nothing_to_keep_ends_at_once_and_a_result_ends_by_itself():
    stop = Stop()
    with pytest.raises(KeyboardInterrupt) as asked:
        stop.ask(signal.SIGTERM, None)
    assert asked.value.args == (signal.SIGTERM,)
    assert stop()  # where the exception was swallowed, the work still ends
    stop = Stop()
    stop.keep("a layout")
    assert not stop()
    stop.ask(signal.SIGTERM, None)
    assert stop()
    assert stop.exit_status == 143
    with pytest.raises(KeyboardInterrupt):
        stop.ask(signal.SIGINT, None)


def test_handlers_come_back():
    before = signal.getsignal(signal.SIGINT)
    with stoppable() as stop:
        assert signal.getsignal(signal.SIGINT) == stop.ask
    assert signal.getsignal(signal.SIGINT) == before


def in_a_callback(work):
    """Do something within a callback of a C library, which swallows exceptions."""
    many = ctypes.c_int * 2
    order = ctypes.CFUNCTYPE(ctypes.c_int, ctypes.c_void_p, ctypes.c_void_p)

    def compare(_one, _other):
        work()
        return 0

    ctypes.CDLL(None).qsort(many(1, 2), 2, ctypes.sizeof(ctypes.c_int), order(compare))


def wait_for_ever():
    in_a_callback(lambda: signal.raise_signal(signal.SIGTERM))
    for _ in range(500):
        time.sleep(0.01)


def test_an_interruption_that_a_library_swallows_is_asked_again_and_shows_nothing(capfd):
    began = time.monotonic()
    with stoppable() as stop:
        with pytest.raises(KeyboardInterrupt) as met:
            wait_for_ever()
        assert met.value.args == (signal.SIGTERM,)
        assert stop()
    assert time.monotonic() < began + 2.0
    assert capfd.readouterr().err == ""


def test_what_there_is_by_then_is_kept(capfd):
    with stoppable() as stop:
        in_a_callback(lambda: signal.raise_signal(signal.SIGINT))
        stop.keep(None)
        time.sleep(0.3)
        assert stop()
        with pytest.raises(KeyboardInterrupt):
            signal.raise_signal(signal.SIGINT)
    assert capfd.readouterr().err == ""


def test_what_else_a_library_swallows_is_shown(capfd):
    def fail():
        raise ValueError("something else")

    with stoppable():
        in_a_callback(fail)
    assert "something else" in capfd.readouterr().err


def test_an_interruption_of_which_a_library_makes_another_error_is_one(monkeypatch):
    asked = [signal.SIGTERM]

    def fails(_name):  # as an extension module does that cannot import what it needs
        with suppress(KeyboardInterrupt):
            for number in asked:
                signal.raise_signal(number)
        raise ImportError("a module failed to import")

    monkeypatch.setattr(main.importlib, "import_module", fails)
    monkeypatch.delenv("FLATPREP_TRACEBACK", raising=False)
    before = {number: signal.getsignal(number) for number in (signal.SIGINT, signal.SIGTERM)}
    monkeypatch.setattr(sys, "excepthook", sys.excepthook)
    answer_interruptions()
    try:
        stopped = CliRunner().invoke(main.root, ["nest"])
        asked.clear()
        broken = CliRunner().invoke(main.root, ["nest"])
    finally:
        for number, handler in before.items():
            signal.signal(number, handler)
    assert (stopped.exit_code, stopped.stderr) == (143, "stopped\n")
    assert broken.exit_code == 2
    assert "flatprep itself failed (ImportError: a module failed to import)" in broken.stderr


def test_an_interruption_that_a_library_prints_is_not_shown():
    work = "import sys; from flatprep.cli.interrupt import answer_interruptions; answer_interruptions(); "
    for error, shown in (("KeyboardInterrupt(15)", False), ("ValueError('else')", True)):
        code = f"{work}sys.excepthook(type(e := {error}), e, None)"
        run = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=True)
        assert bool(run.stderr) == shown
