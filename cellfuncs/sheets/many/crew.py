"""A worker a processor of this machine."""

from __future__ import annotations

import os
import queue
import threading
from collections.abc import Iterator, Sequence

from cellfuncs.sheets.many.found import Found
from cellfuncs.sheets.many.one import Answer, Screen, Task, task_of
from cellfuncs.sheets.many.worker import Worker

_LEAST = 4  # files for which another process is worth its imports
_TURN = 0.5  # s; a wait without an end cannot be interrupted on every system


def processors() -> int:
    """How many processors this process may use."""
    if hasattr(os, "sched_getaffinity"):
        return len(os.sched_getaffinity(0))
    return os.cpu_count() or 1


def answers_here(
    files: Sequence[Found], wanted: tuple[str, ...] = (), screen: Screen | None = None, count: int | None = None
) -> Iterator[Answer]:
    """The answers as they come, from ``count`` processes; whoever stops listening ends the processes."""
    useful = min(processors(), -(-len(files) // _LEAST))
    is_for_many = len(files) >= _LEAST
    workers = [Worker(is_for_many=is_for_many) for _ in range(max(1, count or useful))]
    waiting = iter(files)
    turn, done = threading.Lock(), queue.SimpleQueue()

    def work(worker: Worker) -> None:
        try:
            while True:
                with turn:
                    file = next(waiting, None)
                task = None if file is None else task_of(file, wanted, screen)
                answer = worker.check(task) if isinstance(task, Task) else task
                if answer is None:
                    break
                done.put(answer)
            done.put(None)
        except BaseException as error:  # to whoever waits for the answers
            done.put(error)

    threads = [threading.Thread(target=work, args=(worker,), daemon=True) for worker in workers]
    try:
        for thread in threads:
            thread.start()
        busy = len(threads)
        while busy:
            try:
                answer = done.get(timeout=_TURN)
            except queue.Empty:
                continue
            if isinstance(answer, BaseException):
                raise answer
            if answer is None:
                busy -= 1
            else:
                yield answer
    finally:
        for worker in workers:
            worker.stop()
        for thread in threads:
            thread.join()
        for worker in workers:
            worker.close()
