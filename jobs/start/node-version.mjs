import { PlainError } from '../../db/local/plain-error.mjs';

/** @throws {PlainError} when this Node is older than what package.json asks for */
export function assertNodeVersion(version = process.versions.node) {
  const [major = 0, minor = 0] = version.split('.').map(Number);
  if (major < 20 || (major === 20 && minor < 19)) {
    throw new PlainError(`Node 20.19 or newer is needed; this is ${version}.`);
  }
}
