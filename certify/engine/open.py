"""Opening workers as the command line asks for them."""

from __future__ import annotations

from collections.abc import Sequence

from certify.engine.executors import Here, Processes, Workers
from certify.errors import InputError


def open_workers(jobs: int, cluster: str | None = None, preload: Sequence[str] = ()) -> Workers:
    """Open workers; to be used in a `with`, which ends them.

    jobs: tasks at a time on this machine; 1 is this process itself. cluster: the
    address of a Dask scheduler, whose workers decide how many there are.
    preload: modules that workers of this machine need.
    Errors: InputError.
    """
    if cluster is not None:
        # Imported where it is wanted: the package behind it is an extra.
        from certify.engine.cluster import Cluster

        return Cluster(cluster)
    if jobs < 1:
        raise InputError(f"--jobs: {jobs} is too few; 1 is this process alone")
    return Here() if jobs == 1 else Processes(jobs, preload)
