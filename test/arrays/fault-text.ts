import { ArrayFault } from '../../src/arrays/fault.js';

/** The whole text of the fault that an action throws, one line a part. */
export function faultText(action: () => unknown): string {
  try {
    action();
  } catch (error) {
    if (error instanceof ArrayFault) return [error.message, error.found, error.expected, error.remedy].join('\n');
    throw error;
  }
  throw new Error('nothing was refused');
}
