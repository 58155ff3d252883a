"""Workers do their work, and none outlives the build."""

import os
import signal
import subprocess
import sys
import textwrap
import time

import pytest

from skychart.pages.workers import workers

LONG_SECONDS = 300


@pytest.mark.parametrize("jobs", [1, 2])
def test_results_come_back(jobs):
    """One process or several, the same results."""
    with workers(jobs) as pool:
        assert [pool.submit(pow, 2, n).result() for n in range(5)] == [1, 2, 4, 8, 16]


def test_what_a_task_raises_is_raised():
    """An error in a worker reaches the build."""
    with workers(2) as pool, pytest.raises(ZeroDivisionError):
        pool.submit(divmod, 1, 0).result()


def test_an_interrupt_does_not_wait_for_work_in_progress():
    """A task of minutes is abandoned when the body is interrupted."""
    start, pids = time.monotonic(), []
    with pytest.raises(KeyboardInterrupt):
        start_and_interrupt(pids)
    assert time.monotonic() - start < LONG_SECONDS / 2
    assert_ends(pids[0])


def test_workers_end_when_their_parent_is_killed():
    """Nobody is left behind by a kill that cannot be caught."""
    program = textwrap.dedent("""
        import os, time
        from skychart.pages.workers import workers
        if __name__ == "__main__":
            with workers(2) as pool:
                print(pool.submit(os.getpid).result(), flush=True)
                pool.submit(time.sleep, 300).result()
    """)
    with subprocess.Popen([sys.executable, "-c", program], stdout=subprocess.PIPE, text=True) as parent:
        pid = int(parent.stdout.readline())
        os.kill(parent.pid, signal.SIGKILL)
    assert_ends(pid)


def start_and_interrupt(pids):
    """Keep two workers busy for minutes, and break off."""
    with workers(2) as pool:
        pids.append(pool.submit(os.getpid).result())
        for _ in range(2):
            pool.submit(time.sleep, LONG_SECONDS)
        raise KeyboardInterrupt


def assert_ends(pid):
    """The process is gone within seconds."""
    deadline = time.monotonic() + 20
    while time.monotonic() < deadline:
        try:
            os.kill(pid, 0)
        except ProcessLookupError:
            return
        time.sleep(0.05)
    pytest.fail(f"process {pid} is still there")
