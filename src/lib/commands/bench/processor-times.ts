import { readdirSync, readFileSync } from 'node:fs';

/** Processor time of one kind of process, ms. */
export type ProcessorTimes = Record<string, number>;

/** What a command line begins with, and what we call its process. */
const ROLES: readonly (readonly [pattern: RegExp, role: string])[] = [
  [/build\/index\.js/, 'web server'],
  [/build\/worker\/main\.js/, 'worker'],
  [/mariadbd/, 'MariaDB'],
  [/redis-server/, 'Redis'],
];

/** Linux counts processor time in hundredths of a second for every program (`man 5 proc`, USER_HZ). */
const MS_A_TICK = 10;

interface Status {
  parent: number;
  milliseconds: number;
}

/** Fields 4, 14 and 15 of /proc/PID/stat; the name in field 2 may hold blanks and brackets. */
export function parseStatus(stat: string): Status {
  const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
  return { parent: Number(fields[1]), milliseconds: MS_A_TICK * (Number(fields[11]) + Number(fields[12])) };
}

/** Processor time that each kind of process below `root` has taken so far. Linux alone; empty elsewhere. */
export function processorTimes(root: number): ProcessorTimes {
  const status = new Map<number, Status>();
  for (const entry of readdirSync('/proc').filter((name) => /^\d+$/.test(name))) {
    try {
      status.set(Number(entry), parseStatus(readFileSync(`/proc/${entry}/stat`, 'utf8')));
    } catch {
      // It ended meanwhile.
    }
  }
  const isBelow = (pid: number): boolean => {
    for (let at = status.get(pid)?.parent; at; at = status.get(at)?.parent) if (at === root) return true;
    return false;
  };
  const times: ProcessorTimes = {};
  for (const [pid, { milliseconds }] of status) {
    if (!isBelow(pid)) continue;
    try {
      const command = readFileSync(`/proc/${pid}/cmdline`, 'utf8');
      const role = ROLES.find(([pattern]) => pattern.test(command))?.[1];
      if (role) times[role] = (times[role] ?? 0) + milliseconds;
    } catch {
      // It ended meanwhile.
    }
  }
  return times;
}
