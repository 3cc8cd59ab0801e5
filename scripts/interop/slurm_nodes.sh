#!/usr/bin/env bash
# Three nodes of a Slurm cluster emulated on one machine, as root; all its files lie in one folder.
# usage: slurm_nodes.sh up|kill|down FOLDER [NODE]     (kill: sudden death of a node, n1 to n3)
set -euo pipefail
action=$1
lab=$2
nodes=3
port=${SLURM_PORT:-26817}
host=$(hostname -s)
export SLURM_CONF=$lab/slurm.conf

say() { echo "slurm_nodes: $*" >&2; }

# the process of a pid file, if it is still the program that wrote it
process_of() { # file program
  local pid
  pid=$(cat "$1" 2>/dev/null) || return 1
  [ -n "$pid" ] && [ "$(cat "/proc/$pid/comm" 2>/dev/null)" = "$2" ] && echo "$pid"
}

# a process and all below it, those below first
tree() {
  local child
  for child in $(cat /proc/"$1"/task/*/children 2>/dev/null); do tree "$child"; done
  echo "$1"
}

# the keepers of a job's steps, by job number
keepers() {
  local entry
  for entry in /proc/[0-9]*; do
    [ "$(cat "$entry/comm" 2>/dev/null)" = slurmstepd ] || continue
    if tr '\0' ' ' <"$entry/cmdline" 2>/dev/null | grep -qF "[$1."; then echo "${entry#/proc/}"; fi
  done
}

end() { # file program
  local pid
  pid=$(process_of "$1" "$2") || return 0
  kill "$pid" 2>/dev/null || return 0
  for _ in $(seq 50); do
    kill -0 "$pid" 2>/dev/null || return 0
    sleep 0.1
  done
  kill -9 "$pid" 2>/dev/null || true
}

install() {
  local own=""
  # no service is to start while the packages are unpacked
  if [ ! -e /usr/sbin/policy-rc.d ]; then
    printf '#!/bin/sh\nexit 101\n' >/usr/sbin/policy-rc.d
    chmod +x /usr/sbin/policy-rc.d
    own=yes
  fi
  apt-get update -qq
  DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends slurm-wlm munge >/dev/null
  if [ -n "$own" ]; then rm -f /usr/sbin/policy-rc.d; fi
}

up() {
  local program i
  for program in slurmctld slurmd sbatch munged; do
    command -v "$program" >/dev/null || { install && break; }
  done
  mkdir -p "$lab"/{state,log,run,spool,munge}
  chmod 755 "$lab"
  # Slurm must be able to find its own machine
  if ! getent hosts "$host" >/dev/null; then
    echo "127.0.0.1 $host # $lab" >>/etc/hosts
  fi
  # a munged of its own: key and socket in the folder
  chown munge:munge "$lab/munge"
  (umask 077 && head -c 128 /dev/urandom >"$lab/munge/key")
  chown munge:munge "$lab/munge/key"
  setpriv --reuid=munge --regid=munge --clear-groups munged --force --key-file="$lab/munge/key" \
    --socket="$lab/munge/socket" --pid-file="$lab/munge/pid" --log-file="$lab/munge/log" \
    --seed-file="$lab/munge/seed" 2>"$lab/log/munged.err"
  cat >"$SLURM_CONF" <<CONF
ClusterName=lab
SlurmctldHost=$host(127.0.0.1)
SlurmctldPort=$port
SlurmUser=root
SlurmdUser=root
AuthType=auth/munge
AuthInfo=socket=$lab/munge/socket
CryptoType=crypto/munge
ProctrackType=proctrack/linuxproc
TaskPlugin=task/none
JobAcctGatherType=jobacct_gather/none
AccountingStorageType=accounting_storage/none
JobCompType=jobcomp/filetxt
JobCompLoc=$lab/log/jobs.txt
MpiDefault=none
SelectType=select/cons_tres
SelectTypeParameters=CR_Core
SchedulerType=sched/backfill
SchedulerParameters=bf_interval=1,sched_min_interval=0,sched_interval=1,batch_sched_delay=0
SlurmdParameters=config_overrides
ReturnToService=2
SlurmctldTimeout=10
SlurmdTimeout=10
InactiveLimit=0
KillWait=2
MinJobAge=3600
JobRequeue=1
MaxArraySize=1001
StateSaveLocation=$lab/state
SlurmdSpoolDir=$lab/spool/%n
SlurmctldPidFile=$lab/run/slurmctld.pid
SlurmdPidFile=$lab/run/slurmd-%n.pid
SlurmctldLogFile=$lab/log/slurmctld.log
SlurmdLogFile=$lab/log/slurmd-%n.log
NodeName=n[1-$nodes] NodeHostname=$host NodeAddr=127.0.0.1 Port=[$((port + 1))-$((port + nodes))] CPUs=1 State=UNKNOWN
PartitionName=main Nodes=ALL Default=YES MaxTime=INFINITE State=UP
CONF
  # slurmd wants a plugin for cgroups even where it uses none; this one needs nothing mounted
  echo 'CgroupPlugin=cgroup/v1' >"$lab/cgroup.conf"
  slurmctld -f "$SLURM_CONF" 2>"$lab/log/slurmctld.err"
  for i in $(seq "$nodes"); do
    mkdir -p "$lab/spool/n$i"
    slurmd -f "$SLURM_CONF" -N "n$i" 2>"$lab/log/slurmd-n$i.err"
  done
  for _ in $(seq 150); do
    [ "$(sinfo -h -N -o %T 2>/dev/null | grep -c '^idle$' || true)" = "$nodes" ] && return 0
    sleep 0.1
  done
  sinfo -N >&2 || true
  tail -n 20 "$lab"/log/* >&2 || true
  say "the nodes did not come up"
  return 1
}

# the daemon of the node, the keepers of its jobs and their processes, all at once; then the controller is told
lose() {
  local node=$1 victims jobs job keeper
  jobs=$(squeue -h -w "$node" -t R -o %A)
  victims=$(process_of "$lab/run/slurmd-$node.pid" slurmd)
  for job in $jobs; do
    for keeper in $(keepers "$job"); do victims="$victims $(tree "$keeper")"; done
  done
  kill -9 $victims 2>/dev/null || true
  rm -f "$lab/run/slurmd-$node.pid"
  scontrol update NodeName="$node" State=DOWN Reason=killed
  # tasks of a lost node wait two minutes before they start again: not here
  for job in $jobs; do
    for _ in $(seq 100); do
      case $(squeue -h -j "$job" -o '%T %r' 2>/dev/null) in
        'PENDING BeginTime') scontrol update JobId="$job" StartTime=now && break ;;
        '') break ;;
      esac
      sleep 0.1
    done
  done
  echo $jobs
}

down() {
  local file jobs
  if process_of "$lab/run/slurmctld.pid" slurmctld >/dev/null; then
    jobs=$(squeue -h -o %A 2>/dev/null | sort -u)
    if [ -n "$jobs" ]; then
      scancel $jobs 2>/dev/null || true
      for _ in $(seq 50); do
        [ -z "$(squeue -h 2>/dev/null)" ] && break
        sleep 0.1
      done
    fi
  fi
  for file in "$lab"/run/slurmd-*.pid; do end "$file" slurmd & done
  end "$lab/run/slurmctld.pid" slurmctld &
  wait
  end "$lab/munge/pid" munged
  if grep -qF "# $lab" /etc/hosts; then
    # a bind mount cannot be replaced, only written
    grep -vF "# $lab" /etc/hosts >"$lab/hosts" || true
    cat "$lab/hosts" >/etc/hosts
  fi
  rm -rf "$lab"
}

case $action in
  up) up ;;
  kill) lose "$3" ;;
  down) down ;;
  *) say "up, kill or down, not $action" && exit 2 ;;
esac
