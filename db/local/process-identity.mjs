import { readFileSync } from 'node:fs';

/**
 * When a process started, in the kernel's ticks since boot, or '' where the system does not tell.
 * Together with the id it names one process for good: ids alone are used again.
 *
 * @param {number} pid
 */
function startTicks(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    // The command stands in brackets and may hold blanks: count the fields behind the last bracket.
    return stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19] ?? '';
  } catch {
    return '';
  }
}

/**
 * Whether a process of this id runs, whoever owns it.
 *
 * @param {number} pid
 */
export function isRunning(pid) {
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    return /** @type {NodeJS.ErrnoException} */ (error).code === 'EPERM';
  }
}

/** `<pid> <start>` of a process, for a file that another process will read. */
export function processIdentity(pid = process.pid) {
  return `${pid} ${startTicks(pid)}`;
}

/**
 * Whether the very process that an identity names still runs.
 *
 * @param {string} identity as `processIdentity` wrote it
 */
export function identityRuns(identity) {
  const [pid = '', start = ''] = identity.trim().split(' ');
  if (!/^[1-9]\d*$/.test(pid) || !isRunning(Number(pid))) return false;
  const now = startTicks(Number(pid));
  return start === '' || now === '' || start === now;
}
