import { existsSync } from 'node:fs';
import { PlainError } from '../../db/local/plain-error.mjs';
import { canInstall, installDebianPackage } from './debian.mjs';

const DEBIAN_PATH = '/usr/bin/chromium';

/**
 * Makes sure that there is a Chromium for the browser tests: CHROMIUM_PATH, else Debian's.
 *
 * @param {AbortSignal} signal
 * @throws {PlainError} saying what is missing when it cannot be installed
 */
export async function ensureChromium(signal) {
  const given = process.env.CHROMIUM_PATH;
  if (given) {
    if (!existsSync(given)) throw new PlainError(`CHROMIUM_PATH is ${given}, where there is nothing.`);
    return;
  }
  if (existsSync(DEBIAN_PATH)) return;
  if (!canInstall()) {
    throw new PlainError(
      'The browser tests need Chromium. Install Debian’s package "chromium", or set CHROMIUM_PATH to one.',
    );
  }
  await installDebianPackage('chromium', signal);
}
