"""A sweep on workers that dask-jobqueue starts as Slurm jobs, as many as are wanted.

    python scripts/cluster/slurm_dask.py --jobs 16 study.toml --out out/study

Needs dask-jobqueue (pip install dask-jobqueue). This process keeps the store, the jobs solve:
run it where it may stay for as long as the sweep takes. What else stands on the line goes to
`membrane sweep`. Queue, account and the like are set in dask-jobqueue's own configuration file.
"""

import argparse
import subprocess
import sys

from dask_jobqueue import SLURMCluster


def main() -> int:
    """Start the jobs, sweep, and end the jobs; the exit code is the sweep's."""
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("--jobs", type=int, default=4, help="Slurm jobs of one core each")
    parser.add_argument("--memory", default="2GB", help="memory of each job")
    parser.add_argument("--hours", type=int, default=24, help="time limit of each job")
    options, rest = parser.parse_known_args()
    with SLURMCluster(
        cores=1,
        processes=1,
        memory=options.memory,
        walltime=f"{options.hours}:00:00",
        worker_extra_args=["--nthreads", "1", "--memory-limit", "0"],
    ) as cluster:
        cluster.scale(jobs=options.jobs)
        command = [sys.executable, "-m", "membrane", "sweep", *rest]
        return subprocess.call([*command, "--scheduler", cluster.scheduler_address])


if __name__ == "__main__":
    sys.exit(main())
