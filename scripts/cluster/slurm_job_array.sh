#!/usr/bin/env bash
# A sweep as a Slurm job array: each job works on one part of the points, in a store of its own.
#
#   sbatch --array=1-16 scripts/cluster/slurm_job_array.sh study.toml out/study
#
# A job that is killed or runs out of time loses at most the points in hand: submit the same
# line again, and every part goes on where it stopped. When all are done, on any node:
#
#   membrane sweep study.toml --out out/study --merge
#
#SBATCH --ntasks=1
#SBATCH --cpus-per-task=1
#SBATCH --output=sweep-%A-%a.log
set -euo pipefail

study=${1:?give the study file}
out=${2:?give the folder for the result}
export OPENBLAS_NUM_THREADS=1 OMP_NUM_THREADS=1

exec "${MEMBRANE:-membrane}" sweep "$study" --out "$out" --quiet \
    --workers "${SLURM_CPUS_PER_TASK:-1}" \
    --part "$SLURM_ARRAY_TASK_ID/$SLURM_ARRAY_TASK_COUNT"
