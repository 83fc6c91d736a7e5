"""A real Dask cluster of two workers, each a process of its own, on this machine."""

import os
import sys

import pytest

distributed = pytest.importorskip("distributed") if os.environ.get("CI") != "true" else __import__("distributed")

from cellfuncs import cli  # noqa: E402
from cellfuncs.sheets.many import cluster, worker  # noqa: E402
from cellfuncs.sheets.many.found import found  # noqa: E402
from cellfuncs.sheets.many.one import CHECKED, FAILED, REFUSED, Answer, Outcome, Task  # noqa: E402

pytestmark = pytest.mark.skipif(sys.platform == "win32", reason="ends processes by a signal")


@pytest.fixture(scope="module")
def running():
    """The cluster; a worker that dies is started anew, as a cluster does."""
    with distributed.LocalCluster(
        n_workers=2, threads_per_worker=1, processes=True, dashboard_address=":0", silence_logs=50, host="127.0.0.1"
    ) as local:
        with distributed.Client(local.scheduler_address, set_as_default=False) as client:
            client.run(_import_less)
        yield local


def _import_less():
    from cellfuncs.sheets.many import worker

    worker.FOR_MANY = ()  # saves seconds for each process of the tests


def test_one_worker_is_killed_on_the_way_and_nothing_is_lost(running, folder, right, wrong, kill, gone, monkeypatch):
    monkeypatch.setattr(cluster, "RESULT_WITHIN", 5.0)  # what was on the killed worker is waited for that long
    for number in range(30):
        (folder / f"more {number:02}.xlsx").write_bytes(wrong if number % 3 == 0 else right)
    files, told, killed = found([folder]), [], None
    with distributed.Client(running.scheduler_address, set_as_default=False) as client:
        for answer in cluster.answers_from(running.scheduler_address, files):
            told.append(answer.outcome)
            if len(told) == 4:
                busy = [address for address, tasks in client.processing().items() if tasks]
                pids = client.run(os.getpid, workers=busy)
                killed = pids[busy[0]]
                kill(killed)
    assert killed and gone(killed)
    assert sorted(outcome.place for outcome in told) == sorted(file.place for file in files)
    states = {outcome.place: outcome.state for outcome in told}
    assert [outcome.why for outcome in told if outcome.state == FAILED] == []
    assert states.pop("c.xlsx") == REFUSED and set(states.values()) == {CHECKED}
    assert sum(outcome.errors for outcome in told) == 11


def test_the_same_is_told_as_here_and_no_folder_is_needed_there(running, folder, tmp_path, capsys, own_state):
    told = []
    for words in ([], ["--scheduler", running.scheduler_address]):
        out = tmp_path / f"out{len(words)}"
        code = cli.main(["check", str(folder), "--json", str(out), "--summary", str(out / "s"), *words])
        said = capsys.readouterr()
        pages = {path.relative_to(out): path.read_bytes() for path in out.rglob("*.json")}
        rows = [line.rpartition(",")[0] for line in (out / "s" / "summary.csv").read_text("utf-8-sig").splitlines()]
        told.append((code, said.err, pages, rows))
        for kept in own_state.iterdir():
            kept.unlink()
    assert told[0] == told[1] and told[0][0] == 1 and len(told[0][2]) == 2


def test_a_trap_ends_neither_the_worker_nor_the_rest(running, traps, folder):
    for word in ("die", "crash"):
        (folder / f"{word}.xlsx").write_bytes(f"{word}:".encode())
    with distributed.Client(running.scheduler_address, set_as_default=False) as client:
        client.wait_for_workers(2)
        _everywhere(client, _set_start, worker._START)
        try:
            before = set(client.run(os.getpid).values())
            answers = cluster.answers_from(running.scheduler_address, found([folder]))
            told = {answer.outcome.place: answer.outcome for answer in answers}
            assert set(client.run(os.getpid).values()) == before
        finally:
            _everywhere(client, _set_start, worker.start_of("cellfuncs.sheets.many.worker"))
    assert {place for place, outcome in told.items() if outcome.state == FAILED} == {"die.xlsx", "crash.xlsx"}
    assert told["a.xlsx"].state == CHECKED and told["deep/b.xlsx"].errors == 1


def _everywhere(client, function, *arguments):
    """Run it in the threads that do the tasks."""
    addresses = client.scheduler_info(n_workers=-1)["workers"]
    for future in [client.submit(function, *arguments, workers=[one], pure=False) for one in addresses]:
        future.result(timeout=60)


def _set_start(start):
    from cellfuncs.sheets.many import cluster, worker

    worker._START = start
    cluster.close_own()


def test_another_version_there_is_refused(running, folder, monkeypatch):
    monkeypatch.setattr(cluster, "task_of", lambda file, *_: Task(str(file.path), file.place, b"", version="0.0.1"))
    with pytest.raises(cluster.ClusterLost, match="and this is"):
        list(cluster.answers_from(running.scheduler_address, found([folder])))


def test_a_cluster_without_cellfuncs_is_refused(running, folder, monkeypatch):
    monkeypatch.setattr(cluster, "import_module", _lacks)
    with pytest.raises(cluster.ClusterLost, match="lacks Cellfuncs: pip install"):
        list(cluster.answers_from(running.scheduler_address, found([folder])))


def _lacks(name):
    raise ModuleNotFoundError(f"No module named {name!r}")


@pytest.mark.parametrize("address", ["tcp://127.0.0.1:9", "hello", "nonsense://x:1", ""])
def test_an_address_where_nobody_answers_is_one_line(folder, monkeypatch, capsys, address):
    monkeypatch.setattr(cluster, "ANSWERS_WITHIN", 0.5)
    assert cli.main(["check", str(folder), "--scheduler", address]) == 2
    said = capsys.readouterr()
    assert said.out == "" and said.err.count("\n") == 1 and "no Dask scheduler answers at" in said.err


def test_without_dask_the_line_says_what_to_install(folder, monkeypatch, capsys):
    monkeypatch.setitem(sys.modules, "distributed", None)
    assert cli.main(["check", str(folder), "--scheduler", "tcp://127.0.0.1:9"]) == 2
    assert "pip install cellfuncs[cluster]" in capsys.readouterr().err


def test_a_cluster_that_has_no_workers_is_given_up(folder, monkeypatch):
    monkeypatch.setattr(cluster, "PATIENCE", 0.5)
    with (
        distributed.LocalCluster(
            n_workers=0, processes=True, dashboard_address=":0", silence_logs=50, host="127.0.0.1"
        ) as empty,
        pytest.raises(cluster.ClusterLost, match="no workers"),
    ):
        list(cluster.answers_from(empty.scheduler_address, found([folder])))


def test_what_is_done_is_kept_when_the_cluster_goes_away(folder, monkeypatch, capsys, own_state):
    def answers(address, files, *_):
        yield Answer(Outcome(str(files[0].path), files[0].place, REFUSED, "it is damaged", "digest"))
        raise cluster.ClusterLost("the scheduler went away")

    monkeypatch.setattr(cluster, "answers_from", answers)
    assert cli.main(["check", str(folder), "--scheduler", "tcp://127.0.0.1:9"]) == 2
    err = capsys.readouterr().err
    assert "1 of 3 workbooks are done; the same command goes on" in err and "the scheduler went away" in err
    assert len(list(own_state.iterdir())) == 1
