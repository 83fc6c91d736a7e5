"""Several processes at once, each with its own thread in this one."""

from __future__ import annotations

import os
import queue
import threading
from collections.abc import Iterable, Iterator

from cellfuncs.sheets.many.process import MEMORY, SECONDS, Process
from cellfuncs.sheets.many.task import Done, Task


def cores() -> int:
    """Processors that this process may use."""
    try:
        return max(1, len(os.sched_getaffinity(0)))
    except AttributeError:
        return os.cpu_count() or 1


def examine_all(
    tasks: Iterable[Task], processes: int | None = None, seconds: float = SECONDS, memory: int = MEMORY
) -> Iterator[Done]:
    """What became of each task, in the order in which they are finished; every task has an answer."""
    waiting: queue.SimpleQueue[Task] = queue.SimpleQueue()
    number = 0
    for task in tasks:
        waiting.put(task)
        number += 1
    answers: queue.SimpleQueue[Done] = queue.SimpleQueue()
    workers = [Process(seconds, memory) for _ in range(min(processes or cores(), number))]
    stopped = threading.Event()

    def work(process: Process) -> None:
        while not stopped.is_set():
            try:
                task = waiting.get_nowait()
            except queue.Empty:
                break
            answers.put(process.examine(task))
        process.close()

    threads = [threading.Thread(target=work, args=(worker,), daemon=True) for worker in workers]
    for thread in threads:
        thread.start()
    try:
        for _ in range(number):
            yield answers.get()
    finally:
        stopped.set()
        if any(thread.is_alive() for thread in threads):
            for worker in workers:
                worker.stop()
        for thread in threads:
            thread.join()
