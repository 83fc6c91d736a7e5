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
from concurrent.futures import CancelledError
from importlib import import_module
from typing import Any, NamedTuple

from cellfuncs import __version__
from cellfuncs.errors import CellfuncsError
from cellfuncs.sheets.many.found import Found
from cellfuncs.sheets.many.one import Answer, Screen, Task, failed, task_of
from cellfuncs.sheets.many.worker import Worker

ANSWERS_WITHIN = 20.0  # s, for the scheduler
PATIENCE = 60.0  # s without a single worker
RESULT_WITHIN = 20.0  # s, for an answer to come over from the worker that has it
TIMES = 3  # that a file is sent, when it is lost
AHEAD = 3  # files a thread of the cluster that are under way
_TURN, _ASKED_EVERY = 0.5, 1.0  # s
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


def close_own() -> None:
    """End the process of this thread; the next file gets a new one."""
    if hasattr(_own, "worker"):
        _own.worker.close()
        del _own.worker


def answers_from(
    address: str, files: Sequence[Found], wanted: tuple[str, ...] = (), screen: Screen | None = None
) -> Iterator[Answer]:
    """The answers as they come from the cluster at ``address``; raises ClusterLost, with what would do."""
    client = _client(address)
    under_way: dict[Any, _Sent] = {}
    done: queue.SimpleQueue = queue.SimpleQueue()
    waiting, more = iter(files), True

    def send(sent: _Sent) -> None:
        future = _submitted(client, sent.task)
        under_way[future] = sent
        future.add_done_callback(fetch)

    def fetch(future: Any) -> None:
        # An answer on a worker that died is waited for; nothing else need wait with it.
        threading.Thread(target=lambda: done.put((future, _fetched(future))), daemon=True).start()

    try:
        _refuse_without_us(client, address)
        watch = _Watch(client, address)
        while more or under_way:
            room = AHEAD * max(1, watch.threads())
            while more and len(under_way) < room:
                file = next(waiting, None)
                if file is None:
                    more = False
                    break
                task = task_of(file, wanted, screen)
                if isinstance(task, Answer):
                    yield task
                else:
                    send(_Sent(task, 1))
            with contextlib.suppress(queue.Empty):
                future, fetched = done.get(timeout=_TURN)
                sent = under_way.pop(future)
                answer = _answer(fetched, sent.task, watch)
                future.release()
                if answer is not None:
                    yield answer
                elif sent.times < TIMES:
                    send(_Sent(sent.task, sent.times + 1))
                else:
                    yield failed(sent.task, f"the cluster lost it {TIMES} times")
    finally:
        _leave(client, list(under_way))


class _Sent(NamedTuple):
    """A task that is under way, and how often it was sent."""

    task: Task
    times: int


class _Watch:
    """How many threads the cluster has, asked once a second; raises ClusterLost where it went away."""

    def __init__(self, client: Any, address: str) -> None:
        self.client, self.address = client, address
        self._threads = 0
        self._asked = float("-inf")
        self._alive = time.monotonic()

    def threads(self) -> int:
        now = time.monotonic()
        if now - self._asked > _ASKED_EVERY:
            self._asked, self._threads = now, self._count()
        if self._threads:
            self._alive = now
        elif now - self._alive > PATIENCE:
            raise ClusterLost(f"the cluster at {self.address} has had no workers for {PATIENCE:.0f} s")
        return self._threads

    def refuse_lost(self) -> None:
        if self.client.status != "running":
            raise ClusterLost(f"the scheduler at {self.address} went away")

    def _count(self) -> int:
        self.refuse_lost()
        with contextlib.suppress(Exception):  # silent for now, which the next time will tell
            return sum(worker["nthreads"] for worker in self.client.scheduler_info(n_workers=-1)["workers"].values())
        return 0


def _client(address: str) -> Any:
    try:
        from distributed import Client
        from distributed.comm import get_address_host_port
    except ImportError as error:
        raise ClusterLost("--scheduler needs Dask: pip install cellfuncs[cluster]") from error
    for name in ("distributed", "distributed.comm", "distributed.client", "tornado"):
        logging.getLogger(name).setLevel(logging.CRITICAL)  # what it means is said in our words
    try:
        get_address_host_port(address, strict=True)  # said at once, where it would take the client half a minute
        return Client(address, timeout=ANSWERS_WITHIN, set_as_default=False, name="cellfuncs")
    except (OSError, TimeoutError, ValueError, ImportError) as error:
        raise ClusterLost(
            f"no Dask scheduler answers at {address}; the address is what `dask scheduler` shows, such as "
            "tcp://10.0.0.5:8786"
        ) from error


def _refuse_without_us(client: Any, address: str) -> None:
    """Have scheduler and workers import this module, which is pleasanter than that they fall over a task."""
    try:
        client.run_on_scheduler(import_module, __name__)
        found = client.run(import_module, __name__, on_error="return")
    except ImportError as error:
        found = {"": error}
    if any(isinstance(answer, ImportError) for answer in found.values()):
        raise ClusterLost(
            f"the cluster at {address} lacks Cellfuncs: pip install cellfuncs[cluster]=={__version__} where its "
            "scheduler and its workers run"
        )


def _submitted(client: Any, task: Task) -> Any:
    with warnings.catch_warnings():
        # a file of some MB goes with its task on purpose: the scheduler then has it when a worker is lost
        warnings.simplefilter("ignore", UserWarning)
        return client.submit(check_there, task, pure=False)


def _fetched(future: Any) -> Any:
    """What a task answered, or the exception that came of it."""
    try:
        error = future.exception(timeout=RESULT_WITHIN)
        return future.result(timeout=RESULT_WITHIN) if error is None else error
    except Exception as error:  # to whoever waits for the answers
        return error


def _answer(fetched: Any, task: Task, watch: _Watch) -> Answer | None:
    """What became of a task; None where it, or its answer, was lost with a worker."""
    if fetched is None or isinstance(fetched, (CancelledError, OSError)):
        watch.refuse_lost()
        return None
    if isinstance(fetched, Exception):
        return failed(task, f"the cluster gave it up: {type(fetched).__name__}")
    if isinstance(fetched, str):
        raise ClusterLost(f"the cluster at {watch.address} has Cellfuncs {fetched}, and this is {__version__}")
    return fetched


def _leave(client: Any, under_way: list[Any]) -> None:
    """Take back what is under way and say good-bye, within bounds, whatever state the cluster is in."""
    with contextlib.suppress(Exception):
        if under_way and client.status == "running":
            client.cancel(under_way, force=True)
    with contextlib.suppress(Exception):
        client.close(timeout=5)
