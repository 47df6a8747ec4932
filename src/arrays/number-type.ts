/** How the items of an array are stored, and how they become float64. */
export interface NumberType {
  /** Bytes of one item. */
  readonly size: number;
  /** Whether the bytes of an item stand in the other order than on this machine. */
  readonly swapped: boolean;
  /** Whether a value that float64 cannot hold may occur; `decode` gives NaN for it. */
  readonly wide: boolean;
  /** `count` items from the start of `bytes`, in this machine's byte order. Fills `into`, or gives a view of `bytes`. */
  readonly decode: (bytes: ArrayBuffer, count: number, into: Float64Array) => Float64Array;
}

const machineIsLittle = new Uint8Array(Uint16Array.of(1).buffer)[0] === 1;

/**
 * The number type behind a NumPy type string such as `<f8`, `>i4` or `|b1`; undefined for anything but bool, integers of 1 to
 * 8 bytes and floats of 2 to 8. Long doubles have a different layout on every machine.
 */
export function numberType(descr: string): NumberType | undefined {
  const match = /^([<>|=])([biuf])([1248])$/.exec(descr);
  if (match === null) return undefined;
  const [, order, letter, digit] = match;
  const size = Number(digit);
  // Where an item is one byte there is no order; where it is more, the file must say which.
  if (size > 1 && order !== '<' && order !== '>') return undefined;
  const decode = decoders[`${letter ?? ''}${digit ?? ''}`];
  if (decode === undefined) return undefined;
  const wide = size === 8 && letter !== 'f';
  return { size, swapped: size > 1 && (order === '<') !== machineIsLittle, wide, decode };
}

const decoders: Readonly<Record<string, NumberType['decode']>> = {
  b1: (bytes, count, into) => convertTruth(new Uint8Array(bytes, 0, count), into),
  i1: (bytes, count, into) => copy(new Int8Array(bytes, 0, count), into),
  u1: (bytes, count, into) => copy(new Uint8Array(bytes, 0, count), into),
  i2: (bytes, count, into) => copy(new Int16Array(bytes, 0, count), into),
  u2: (bytes, count, into) => copy(new Uint16Array(bytes, 0, count), into),
  i4: (bytes, count, into) => copy(new Int32Array(bytes, 0, count), into),
  u4: (bytes, count, into) => copy(new Uint32Array(bytes, 0, count), into),
  i8: (bytes, count, into) => convertWide(new BigInt64Array(bytes, 0, count), into),
  u8: (bytes, count, into) => convertWide(new BigUint64Array(bytes, 0, count), into),
  f2: (bytes, count, into) => convertHalf(new Uint16Array(bytes, 0, count), into),
  f4: (bytes, count, into) => copy(new Float32Array(bytes, 0, count), into),
  f8: (bytes, count) => new Float64Array(bytes, 0, count),
};

function copy(items: ArrayLike<number>, into: Float64Array): Float64Array {
  into.set(items);
  return into.subarray(0, items.length);
}

function convertTruth(items: Uint8Array, into: Float64Array): Float64Array {
  for (let i = 0; i < items.length; i += 1) into[i] = items[i] === 0 ? 0 : 1;
  return into.subarray(0, items.length);
}

function convertHalf(items: Uint16Array, into: Float64Array): Float64Array {
  const values = halves();
  for (let i = 0; i < items.length; i += 1) into[i] = values[items[i]!]!;
  return into.subarray(0, items.length);
}

// A table is fifty times as fast as the arithmetic; half a megabyte, so only for those who need it.
let halfTable: Float64Array | null = null;

function halves(): Float64Array {
  halfTable ??= Float64Array.from({ length: 0x10000 }, (_, bits) => half(bits));
  return halfTable;
}

function convertWide(items: BigInt64Array | BigUint64Array, into: Float64Array): Float64Array {
  for (let i = 0; i < items.length; i += 1) {
    const value = Number(items[i]!);
    into[i] = Number.isSafeInteger(value) || BigInt(value) === items[i] ? value : NaN;
  }
  return into.subarray(0, items.length);
}

/** IEEE 754 binary16: 1 bit of sign, 5 of exponent, 10 of fraction. */
function half(bits: number): number {
  const sign = bits >= 0x8000 ? -1 : 1;
  const exponent = (bits >> 10) & 0x1f;
  const fraction = bits & 0x3ff;
  if (exponent === 0) return sign * fraction * 2 ** -24;
  if (exponent === 0x1f) return fraction === 0 ? sign * Infinity : NaN;
  return sign * (1024 + fraction) * 2 ** (exponent - 25);
}
