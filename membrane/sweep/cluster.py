"""The engines on many processes, by Dask: local ones, or those of a running scheduler."""

from __future__ import annotations

import logging
import signal
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from time import monotonic
from typing import Any
from uuid import uuid4

import dask
from dask.system import CPU_COUNT
from distributed import (
    Client,
    Future,
    KilledWorker,
    LocalCluster,
    WorkerPlugin,
    get_worker,
    wait,
)
from distributed.client import FutureCancelledError

from membrane.errors import EngineError
from membrane.sweep.answer import Answering, Outcome, outcomes_of
from membrane.sweep.engine import Bundle

AHEAD = 2
"""Bundles for each worker that are under way, so that none of them waits for the next."""

PATIENCE = 10.0
"""Seconds after which the workers are counted again, and to wait for a scheduler."""

NO_FIXED_PORT = "127.0.0.1:0"
"""Where Dask's own pages are shown: several sweeps may run on one machine."""

ENVIRONMENT = {
    **{f"{library}_NUM_THREADS": 1 for library in ("OMP", "MKL", "OPENBLAS")},
    "MALLOC_TRIM_THRESHOLD_": 1 << 30,
    "MALLOC_MMAP_THRESHOLD_": 1 << 25,
}
"""Of each process. One thread, and memory that is kept: Dask would have every freed array given
back to the system, which doubles the time of a mesh and its matrices."""

SETTINGS = {
    "distributed.nanny.pre-spawn-environ": ENVIRONMENT,
    "distributed.worker.profile.enabled": False,  # nobody looks at it, and it takes its time
}

CORES: int = CPU_COUNT
"""Processors that this process may use."""


class Processes:
    """Processes of this machine, each with one thread."""

    def __init__(self, count: int) -> None:
        self._count = count

    def outcomes(self, answering: Answering, bundles: Iterator[Bundle]) -> Iterator[list[Outcome]]:
        """Some outcomes at a time, in any order. Raises EngineError where Dask gives up."""
        with (
            dask.config.set(SETTINGS),
            LocalCluster(
                n_workers=self._count,
                threads_per_worker=1,
                memory_limit=0,
                dashboard_address=NO_FIXED_PORT,
                silence_logs=logging.CRITICAL,
            ) as cluster,
            Client(cluster) as client,
        ):
            client.register_plugin(_Deaf())
            # a worker that dies while it starts is given up by Dask: then another is wanted
            yield from _worked(client, answering, bundles, lambda: cluster.scale(self._count))


class Scheduler:
    """The workers of a Dask scheduler that runs somewhere.

    address : such as "tcp://node7:8786"
    """

    def __init__(self, address: str) -> None:
        self._address = address

    def outcomes(self, answering: Answering, bundles: Iterator[Bundle]) -> Iterator[list[Outcome]]:
        """Some outcomes at a time, in any order. Raises EngineError where it is lost."""
        with _connected(self._address) as client:
            yield from _worked(client, answering, bundles, lambda: None)


class _Keeper(WorkerPlugin):  # type: ignore[misc]
    """Keeps who answers on each worker, also on one that comes later."""

    def __init__(self, name: str, answering: Answering) -> None:
        self.name = name
        self.answering = answering


class _Deaf(WorkerPlugin):  # type: ignore[misc]
    """Leaves Ctrl-C to the process that started the workers; it ends them in good order."""

    name = "deaf"

    def setup(self, worker: Any) -> None:
        """Called in the main thread of each worker as it starts."""
        signal.signal(signal.SIGINT, signal.SIG_IGN)


@contextmanager
def _connected(address: str) -> Iterator[Client]:
    try:
        client = Client(address, timeout=PATIENCE)
    except (OSError, ValueError) as failure:
        raise EngineError(
            f"no Dask scheduler answers at {address} ({failure}); start one, or leave the "
            "address out to use this machine."
        ) from failure
    with client:
        yield client


def _worked(
    client: Client, answering: Answering, bundles: Iterator[Bundle], revive: Callable[[], None]
) -> Iterator[list[Outcome]]:
    """Outcomes as they come.

    revive : called now and then, to bring back workers that are lost for good
    """
    name = f"membrane-{uuid4().hex}"
    client.register_plugin(_Keeper(name, answering))
    try:
        yield from _UnderWay(client, name, bundles, revive).outcomes()
    finally:
        if client.status == "running":
            client.unregister_worker_plugin(name)


class _UnderWay:
    """The bundles that workers have been given, never more than they need."""

    def __init__(
        self, client: Client, name: str, bundles: Iterator[Bundle], revive: Callable[[], None]
    ) -> None:
        self._revive = revive
        self._client = client
        self._name = name
        self._bundles = bundles
        self._given: dict[Future, Bundle] = {}
        self._room, self._counted = 0, 0.0

    def outcomes(self) -> Iterator[list[Outcome]]:
        """The outcomes as they come."""
        self._fill()
        while self._given:
            for future in self._finished():
                found = self._result(future, self._given.pop(future))
                self._fill()
                if found:
                    yield found

    def _finished(self) -> list[Future]:
        """Those that are done, or none after some time."""
        try:
            done, _ = wait(list(self._given), timeout=PATIENCE, return_when="FIRST_COMPLETED")
        except TimeoutError:
            self._fill()
            return []
        return list(done)

    def _fill(self) -> None:
        if monotonic() >= self._counted:
            self._revive()
            self._room = AHEAD * max(1, sum(self._client.nthreads().values()))
            self._counted = monotonic() + PATIENCE
        while len(self._given) < self._room:
            bundle = next(self._bundles, None)
            if bundle is None:
                return
            self._give(bundle)

    def _give(self, bundle: Bundle) -> None:
        future = self._client.submit(_outcomes, self._name, bundle, pure=False)
        self._given[future] = bundle

    def _result(self, future: Future, bundle: Bundle) -> list[Outcome]:
        """The outcomes of a bundle; none where its points are to be tried one by one."""
        try:
            found: list[Outcome] = future.result()
        except KilledWorker:
            return self._after_deaths(bundle)
        except (FutureCancelledError, OSError) as failure:
            raise EngineError(
                "the Dask scheduler was lost; what was done is stored. Run the same command "
                "again to go on."
            ) from failure
        return found

    def _after_deaths(self, bundle: Bundle) -> list[Outcome]:
        """What to do with points during which one worker after another has died."""
        if len(bundle) > 1:
            for point in bundle:
                self._give((point,))
            return []
        sentence = "every process that solved it died; it may need more memory than there is."
        return [Outcome(bundle[0], None, sentence, 0.0)]


def _outcomes(name: str, bundle: Bundle) -> list[Outcome]:
    """What a worker does."""
    return outcomes_of(bundle, get_worker().plugins[name].answering)
