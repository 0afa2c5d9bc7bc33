// Preloaded into a process to be measured: at its end it writes the most memory it ever held, in KiB, to file
// descriptor 3. VmHWM belongs to the process alone; the system's maxRSS, taken elsewhere, may start at its parent's.
import { readFileSync, writeSync } from 'node:fs';

function peakKibibytes() {
  try {
    const kept = /^VmHWM:\s+(\d+) kB$/m.exec(readFileSync('/proc/self/status', 'utf8'))?.[1];
    if (kept !== undefined) return Number(kept);
  } catch {
    // No /proc on this system.
  }
  return process.resourceUsage().maxRSS;
}

process.on('exit', () => writeSync(3, String(peakKibibytes())));
