#!/usr/bin/env bash
# Tries the cluster scripts on a real Slurm of one node, set up here from Debian's packages.
# For a machine that may be thrown away, as root: it writes /etc/slurm/slurm.conf.
#
#   scripts/cluster/one_node_slurm.sh [FOLDER]
#
# Compares the table of a job array of four parts, one job of which is killed and submitted
# again, and that of Dask workers in Slurm jobs, with the table of a run without Slurm.
set -euo pipefail

root=$(cd "$(dirname "${BASH_SOURCE[0]}")/../.." && pwd)
work=$(realpath "${1:-$root/out/slurm}")
study=$work/study.toml
export MEMBRANE=$root/.venv/bin/membrane

install_slurm() {
    command -v slurmctld >/dev/null && return
    apt-get update -qq
    DEBIAN_FRONTEND=noninteractive apt-get install -qq --yes --no-install-recommends \
        slurm-wlm munge >/dev/null
}

configure() {
    local host megabytes
    host=$(hostname --short)
    megabytes=$(awk '/^MemTotal/ {print int($2 / 1100)}' /proc/meminfo)
    mkdir -p /etc/slurm /var/spool/slurmctld /var/spool/slurmd /run/munge
    cat >/etc/slurm/slurm.conf <<CONF
ClusterName=one
SlurmctldHost=$host
SlurmUser=root
StateSaveLocation=/var/spool/slurmctld
SlurmdSpoolDir=/var/spool/slurmd
ProctrackType=proctrack/linuxproc
TaskPlugin=task/none
SelectType=select/cons_tres
SelectTypeParameters=CR_Core
MpiDefault=none
ReturnToService=2
NodeName=$host CPUs=$(nproc) RealMemory=$megabytes State=UNKNOWN
PartitionName=all Nodes=ALL Default=YES MaxTime=INFINITE State=UP
CONF
}

start() {
    chown munge: /run/munge
    pgrep -x munged >/dev/null || runuser --user munge -- /usr/sbin/munged
    pgrep -x slurmctld >/dev/null || slurmctld
    pgrep -x slurmd >/dev/null || slurmd
    for _ in $(seq 30); do
        sinfo --noheader --format=%T 2>/dev/null | grep --quiet idle && return
        sleep 1
    done
    echo "Slurm did not come up; see /var/log/slurm" >&2
    exit 1
}

wait_for_jobs() {
    while [[ -n $(squeue --noheader) ]]; do sleep 1; done
}

submit() {
    sbatch --parsable --chdir "$work" "$@" \
        "$root/scripts/cluster/slurm_job_array.sh" "$study" "$work/array"
}

install_slurm
configure
start
rm -rf "$work"
mkdir -p "$work"
sed 's/^steps = 12$/steps = 4/' "$root/scripts/sweep_paste.toml" >"$study"

"$MEMBRANE" sweep "$study" --out "$work/plain" --quiet
job=$(submit --array=1-4)
sleep 8
scancel --signal=KILL "${job}_1" || true
wait_for_jobs
submit --array=1-4 >/dev/null
wait_for_jobs
"$MEMBRANE" sweep "$study" --out "$work/array" --merge
cmp "$work/plain/points.csv" "$work/array/points.csv"
echo "The job array's table is that of the run without Slurm."

if "$root/.venv/bin/python" -c "import dask_jobqueue" 2>/dev/null; then
    (cd "$work" && "$root/.venv/bin/python" "$root/scripts/cluster/slurm_dask.py" \
        --jobs 2 --memory 1GB --hours 1 "$study" --out "$work/dask" --quiet)
    wait_for_jobs
    cmp "$work/plain/points.csv" "$work/dask/points.csv"
    echo "The table of Dask workers in Slurm jobs is the same too."
fi
