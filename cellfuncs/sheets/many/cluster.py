"""Files checked on a running Dask cluster.

Files travel as bytes, so scheduler and workers need no folder of the user's, but Cellfuncs in the same version. Every
thread of a Dask worker keeps a bounded process of its own, so that a trap ends neither the Dask worker nor its other
files. When a Dask worker is lost, the scheduler gives its files to others; their bytes are kept by the scheduler.
"""

from __future__ import annotations

import contextlib
import logging
import queue
import threading
import time
import warnings
from collections.abc import Iterator, Sequence
from typing import Any

from cellfuncs import __version__
from cellfuncs.errors import CellfuncsError
from cellfuncs.sheets.many.found import Found
from cellfuncs.sheets.many.one import Answer, Screen, Task, failed, task_of
from cellfuncs.sheets.many.worker import Worker

ANSWERS_WITHIN = 20.0  # s, for the scheduler
PATIENCE = 60.0  # s without a single worker
AHEAD = 3  # files a thread of the cluster that are under way
_TURN = 0.5  # s
_own = threading.local()


class ClusterLost(CellfuncsError):
    """The cluster cannot be reached, is not fit for this, or went away."""


def check_there(task: Task) -> Answer | str:
    """Check a file in a process of this thread of a Dask worker; a text where the versions differ."""
    if task.version != __version__:
        return __version__
    if not hasattr(_own, "worker"):
        _own.worker = Worker()
    return _own.worker.check(task)


def answers_from(
    address: str, files: Sequence[Found], wanted: tuple[str, ...] = (), screen: Screen | None = None
) -> Iterator[Answer]:
    """The answers as they come from the cluster at ``address``; raises ClusterLost, with what would do."""
    client = _client(address)
    under_way: dict[Any, Task] = {}
    done: queue.SimpleQueue = queue.SimpleQueue()
    waiting, more = iter(files), True
    alone_since: float | None = None
    try:
        while more or under_way:
            threads = _threads(client)
            alone_since = None if threads else (alone_since or time.monotonic())
            _refuse_lost(client, address, alone_since)
            while more and len(under_way) < AHEAD * max(1, threads):
                file = next(waiting, None)
                if file is None:
                    more = False
                    break
                task = task_of(file, wanted, screen)
                if isinstance(task, Answer):
                    yield task
                    continue
                future = _sent(client, task)
                under_way[future] = task
                future.add_done_callback(done.put)
            for future in _next(done):
                task = under_way.pop(future, None)
                if task is not None:
                    yield _answer(future, task, client, address)
                future.release()
    finally:
        _leave(client, list(under_way))


def _client(address: str) -> Any:
    try:
        from distributed import Client
    except ImportError as error:
        raise ClusterLost("--scheduler needs Dask: pip install cellfuncs[cluster]") from error
    for name in ("distributed", "distributed.comm", "distributed.client", "tornado"):
        logging.getLogger(name).setLevel(logging.CRITICAL)  # what it means is said in our words
    try:
        return Client(address, timeout=ANSWERS_WITHIN, set_as_default=False, name="cellfuncs")
    except (OSError, TimeoutError, ValueError, ImportError) as error:
        raise ClusterLost(
            f"no Dask scheduler answers at {address}; the address is what `dask scheduler` shows, such as "
            "tcp://10.0.0.5:8786"
        ) from error


def _threads(client: Any) -> int:
    """Threads of all workers that are there now; none where the scheduler is silent."""
    with contextlib.suppress(Exception):
        return sum(worker["nthreads"] for worker in client.scheduler_info(n_workers=-1)["workers"].values())
    return 0


def _refuse_lost(client: Any, address: str, alone_since: float | None) -> None:
    if client.status in ("closed", "closing"):
        raise ClusterLost(f"the scheduler at {address} went away")
    if alone_since is not None and time.monotonic() - alone_since > PATIENCE:
        raise ClusterLost(f"the cluster at {address} has had no workers for {PATIENCE:.0f} s")


def _sent(client: Any, task: Task) -> Any:
    with warnings.catch_warnings():
        # a file of some MB goes with its task on purpose: the scheduler then has it when a worker is lost
        warnings.simplefilter("ignore", UserWarning)
        return client.submit(check_there, task, pure=False)


def _next(done: queue.SimpleQueue) -> list[Any]:
    try:
        return [done.get(timeout=_TURN)]
    except queue.Empty:
        return []


def _answer(future: Any, task: Task, client: Any, address: str) -> Answer:
    if future.status == "finished":
        answer = future.result(timeout=ANSWERS_WITHIN)
        if isinstance(answer, str):
            raise ClusterLost(f"the cluster at {address} has Cellfuncs {answer}, this is {__version__}; install one")
        return answer if answer is not None else failed(task, "its worker was closed")
    if future.status == "error":
        error = future.exception(timeout=ANSWERS_WITHIN)
        if "No module named 'cellfuncs" in _chain(error):
            raise ClusterLost(
                f"the cluster at {address} lacks Cellfuncs: pip install cellfuncs=={__version__} for its scheduler and "
                "workers"
            )
        return failed(task, f"the cluster gave it up: {type(error).__name__}")
    _refuse_lost(client, address, None)
    return failed(task, "it was cancelled on the cluster")


def _chain(error: BaseException | None) -> str:
    texts = []
    while error is not None and len(texts) < 10:
        texts.append(str(error))
        error = error.__cause__ or error.__context__
    return " ".join(texts)


def _leave(client: Any, under_way: list[Any]) -> None:
    """Take back what is under way and say good-bye, within bounds, whatever state the cluster is in."""
    with contextlib.suppress(Exception):
        if under_way and client.status == "running":
            client.cancel(under_way, force=True)
    with contextlib.suppress(Exception):
        client.close(timeout=5)
