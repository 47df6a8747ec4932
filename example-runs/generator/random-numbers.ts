/**
 * Seeded random numbers. xoshiro128** 1.1 on 32-bit words (Blackman & Vigna 2021, ACM Trans. Math. Softw. 47, 36; from
 * memory), its four words of state filled by a multiply-xorshift mixer of the splitmix kind (Steele, Lea & Flood 2014;
 * the 32-bit constants are those of MurmurHash3's finaliser, Appleby, public domain; from memory). Only 32-bit integer
 * operations, so that the same seed gives the same bits on every machine.
 */

const goldenRatio = 0x9e3779b9;

function mixed(word: number): number {
  let value = word;
  value = Math.imul(value ^ (value >>> 16), 0x85ebca6b);
  value = Math.imul(value ^ (value >>> 13), 0xc2b2ae35);
  return (value ^ (value >>> 16)) >>> 0;
}

function rotated(word: number, by: number): number {
  return ((word << by) | (word >>> (32 - by))) >>> 0;
}

/** The next 32 bits, uniform, from four words of state, which are changed; not all of them may be zero. */
export function xoshiro(state: Uint32Array): () => number {
  return () => {
    const second = state[1]!;
    const result = Math.imul(rotated(Math.imul(second, 5), 7), 9) >>> 0;
    state[2]! ^= state[0]!;
    state[3]! ^= second;
    state[1]! ^= state[2]!;
    state[0]! ^= state[3]!;
    state[2]! ^= second << 9;
    state[3] = rotated(state[3]!, 11);
    return result;
  };
}

/**
 * The numbers of one seed.
 * @param seed a whole number from 0 to 2^32 - 1
 * @param stream tells apart independent uses of one seed, such as phases and noise
 */
function randomBits(seed: number, stream: number): () => number {
  const start = mixed(seed) ^ Math.imul(stream + 1, goldenRatio);
  return xoshiro(new Uint32Array([1, 2, 3, 4].map((k) => mixed(start + Math.imul(k, goldenRatio)))));
}

/**
 * Standard normal numbers by Box & Muller (1958, Ann. Math. Stat. 29, 610):
 * sqrt(-2 ln u) cos(2 pi v) and sqrt(-2 ln u) sin(2 pi v), with u in (0, 1] of 32 bits.
 */
export function normalNumbers(seed: number, stream: number, count: number): Float64Array {
  const bits = randomBits(seed, stream);
  const normals = new Float64Array(count + (count % 2));
  for (let i = 0; i < count; i += 2) {
    const radius = Math.sqrt(-2 * Math.log((bits() + 1) / 2 ** 32));
    const angle = (2 * Math.PI * bits()) / 2 ** 32;
    normals[i] = radius * Math.cos(angle);
    normals[i + 1] = radius * Math.sin(angle);
  }
  return normals.subarray(0, count);
}
