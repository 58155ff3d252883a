"""Processes that share the work of a build, and stop at once when it stops, however it does."""

import multiprocessing
import os
import signal
import threading
from collections.abc import Callable, Iterator
from concurrent.futures import Executor, Future, ProcessPoolExecutor
from contextlib import contextmanager
from multiprocessing.connection import Connection
from typing import Any


@contextmanager
def workers(jobs: int) -> Iterator[Executor]:
    """An executor of `jobs` fresh processes, started the same way on every system; with one job the work is done here.

    If the body fails or is interrupted, work in progress is abandoned.
    """
    if jobs == 1:
        yield _Here()
        return
    context = multiprocessing.get_context("spawn")
    leash, held = context.Pipe(duplex=False)
    pool = ProcessPoolExecutor(jobs, context, _stay_on, (leash,))
    with _interrupts_held():
        for _ in range(jobs):
            pool.submit(os.getpid)  # starts a worker
    try:
        yield pool
    except BaseException:
        held.close()
        raise
    finally:
        pool.shutdown(cancel_futures=True)
        held.close()
        leash.close()


@contextmanager
def _interrupts_held() -> Iterator[None]:
    """Processes started within inherit the block: Ctrl-C is for the parent, even while they are still importing."""
    if not hasattr(signal, "pthread_sigmask"):
        yield
        return
    former = signal.pthread_sigmask(signal.SIG_BLOCK, {signal.SIGINT})
    try:
        yield
    finally:
        signal.pthread_sigmask(signal.SIG_SETMASK, former)


class _Here(Executor):
    """Does each piece of work as it is handed in."""

    def submit(self, task: Callable[..., Any], /, *arguments: Any, **named: Any) -> Future[Any]:
        """A finished future of `task`; what the task raises is raised here."""
        done: Future[Any] = Future()
        done.set_result(task(*arguments, **named))
        return done


def _stay_on(leash: Connection) -> None:
    """In a worker: leave interrupts to the parent, and end when it lets go of the other end or ends itself."""
    signal.signal(signal.SIGINT, signal.SIG_IGN)
    threading.Thread(target=_end_with, args=(leash,), daemon=True).start()


def _end_with(leash: Connection) -> None:
    leash.poll(None)
    os._exit(1)
