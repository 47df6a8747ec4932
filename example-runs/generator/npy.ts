/** An NPY 1.0 file (the format of NumPy, documented there) of little-endian numbers in C order. */
function npy(kind: '<f4' | '<i4', shape: readonly number[], count: number, write: (view: DataView, offset: number, index: number) => void): Uint8Array {
  const shapeText = shape.length === 1 ? `(${String(shape[0])},)` : `(${shape.join(', ')})`;
  const dictionary = `{'descr': '${kind}', 'fortran_order': False, 'shape': ${shapeText}, }`;
  // Magic, version, length and dictionary together fill whole blocks of 64 bytes; the last byte is a line feed.
  const start = Math.ceil((10 + dictionary.length + 1) / 64) * 64;
  const bytes = new Uint8Array(start + 4 * count);
  bytes.set([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0, (start - 10) & 0xff, (start - 10) >> 8]);
  bytes.set(new TextEncoder().encode(`${dictionary.padEnd(start - 11)}\n`), 10);
  const view = new DataView(bytes.buffer);
  for (let i = 0; i < count; i += 1) write(view, start + 4 * i, i);
  return bytes;
}

/** Rows of equal length as float32, [rows, columns]. */
export function floatRows(rows: readonly (readonly number[])[]): Uint8Array {
  const values = rows.flat();
  return npy('<f4', [rows.length, values.length / rows.length], values.length, (view, offset, i) => {
    view.setFloat32(offset, values[i]!, true);
  });
}

/** Whole numbers as int32, [length]. */
export function integers(values: readonly number[]): Uint8Array {
  return npy('<i4', [values.length], values.length, (view, offset, i) => {
    view.setInt32(offset, values[i]!, true);
  });
}
