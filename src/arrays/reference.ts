import { ArrayFault } from './fault.js';
import { openNpy } from './npy.js';
import type { StoredArray } from './stored-array.js';

/** How a study names an array: a file, perhaps with a name inside it behind `#`, or the numbers themselves. */
export type ArrayReference = string | readonly unknown[];

/** One kind of file. Adding a kind is adding a file with its reader, and a line to `formats`. */
interface ArrayFormat {
  readonly endings: readonly string[];
  /** Whether a file of this kind holds several arrays, so that a reference must say which. */
  readonly parts: boolean;
  readonly open: (path: string, name: string, part: string) => StoredArray;
}

const formats: readonly ArrayFormat[] = [{ endings: ['.npy'], parts: false, open: openNpy }];

/** A reference to a file, taken apart. */
export interface FileReference {
  readonly file: string;
  /** Opens the file once its place on this machine is known. */
  readonly open: (path: string) => StoredArray;
}

/** Finds the reader for a name such as `fiducial.npy`. */
export function fileReference(name: string): FileReference {
  const [file = '', ...rest] = name.split('#');
  const format = formats.find(({ endings }) => endings.some((ending) => file.toLowerCase().endsWith(ending)));
  if (format === undefined) throw unknownFormat(name);
  if (!format.parts && rest.length > 0) {
    throw new ArrayFault('a file holds one array only', {
      found: name,
      expected: file,
      remedy: `remove the # and what follows: a ${format.endings[0] ?? ''} file has no names inside`,
    });
  }
  return { file, open: (path) => format.open(path, name, rest.join('#')) };
}

function unknownFormat(name: string): ArrayFault {
  return new ArrayFault('a kind of array file is not read by this version', {
    found: name,
    expected: 'a .npy file, or a list of numbers',
    remedy: 'save the array with numpy.save, and name that file here',
  });
}
