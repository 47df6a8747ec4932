import { closeSync, constants, fstatSync, openSync, readSync, statSync } from 'node:fs';
import { ArrayFault } from './fault.js';

/** A file that is open for reading. */
export interface OpenFile {
  readonly descriptor: number;
  readonly bytes: number;
  /** Changes when the file does. */
  readonly stamp: string;
}

// Windows has no such flag; elsewhere it keeps `open` from waiting for the other end of a pipe.
const withoutWaiting = (constants as { readonly O_NONBLOCK?: number }).O_NONBLOCK ?? 0;

/**
 * Opens a file, hands it to `use`, and closes it whatever happens. Pipes, devices and folders are refused, never waited for.
 * @param name the file as the user knows it, for messages
 */
export function withRegularFile<T>(path: string, name: string, use: (file: OpenFile) => T): T {
  const descriptor = open(path, name);
  try {
    const stats = fstatSync(descriptor);
    if (!stats.isFile()) throw notAFile(name);
    return use({ descriptor, bytes: stats.size, stamp: `${String(stats.size)} ${String(stats.mtimeMs)} ${String(stats.ino)}` });
  } finally {
    closeSync(descriptor);
  }
}

/** Fills `bytes` from `position` on. */
export function readExactly(file: OpenFile, bytes: Uint8Array, position: number, name: string): void {
  for (let done = 0; done < bytes.length; ) {
    const count = readSync(file.descriptor, bytes, done, bytes.length - done, position + done);
    if (count === 0) throw changedFile(name);
    done += count;
  }
}

export function changedFile(name: string): ArrayFault {
  return new ArrayFault('a file changed while it was read', {
    found: `${name} is not what it was when the study was loaded`,
    expected: 'files that stay as they are until the build is done',
    remedy: 'wait until whatever writes the file has finished, then build again',
  });
}

function open(path: string, name: string): number {
  try {
    if (!statSync(path).isFile()) throw notAFile(name);
    return openSync(path, constants.O_RDONLY | withoutWaiting);
  } catch (error) {
    if (error instanceof ArrayFault) throw error;
    throw new ArrayFault('a file cannot be read', {
      found: `${name}: ${systemReason(error)}`,
      expected: 'a file that this program may read',
      remedy: 'check that the file exists and its permissions',
    });
  }
}

function notAFile(name: string): ArrayFault {
  return new ArrayFault('a path is not a file', {
    found: `${name} is a folder, a pipe or a device`,
    expected: 'an ordinary file',
    remedy: 'name the file that holds the data',
  });
}

const reasons: Readonly<Record<string, string>> = {
  ENOENT: 'no such file',
  EACCES: 'permission denied',
  EPERM: 'permission denied',
  ELOOP: 'links that lead in a circle',
  ENOTDIR: 'a part of its path is a file, not a folder',
  ENAMETOOLONG: 'the name is too long',
};

/** The reason of a failed system call without the path in it: messages must not differ between machines. */
export function systemReason(error: unknown): string {
  const code = error instanceof Error && 'code' in error && typeof error.code === 'string' ? error.code : 'unknown reason';
  return reasons[code] ?? code;
}
