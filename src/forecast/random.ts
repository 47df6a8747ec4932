/** A stream of pseudo-random numbers: the next 32 bits, uniform. */
export type RandomBits = () => number;

/**
 * Seeded generator, so that the same study gives the same bytes. xorshift128 over 32-bit words (Marsaglia 2003, J. Stat.
 * Software 8(14), from memory), started from an FNV-1a hash of the seed text with four different offsets.
 * Good enough for signs and splits; nothing here is a secret.
 */
export function seededBits(seed: string): RandomBits {
  // Only four zeros at once would stall the generator, and four hashes do not agree on that; one fixed bit rules it out.
  const state = new Uint32Array([1, 2, 3, 4].map((salt) => hash(`${String(salt)}:${seed}`) | (salt === 1 ? 1 : 0)));
  const next = (): number => {
    let t = state[0]!;
    t ^= t << 11;
    t ^= t >>> 8;
    state[0] = state[1]!;
    state[1] = state[2]!;
    state[2] = state[3]!;
    const last = state[3]!;
    state[3] = last ^ (last >>> 19) ^ t;
    return state[3];
  };
  // The first words still show the seed.
  for (let k = 0; k < 16; k += 1) next();
  return next;
}

function hash(text: string): number {
  let value = 0x811c9dc5;
  for (let i = 0; i < text.length; i += 1) {
    value ^= text.charCodeAt(i);
    value = Math.imul(value, 0x01000193);
  }
  return value >>> 0;
}

/** 0 ... count - 1 in random order (Fisher-Yates). */
export function shuffled(count: number, bits: RandomBits): Int32Array {
  const order = Int32Array.from({ length: count }, (_, i) => i);
  for (let i = count - 1; i > 0; i -= 1) {
    const j = Math.floor((bits() / 2 ** 32) * (i + 1));
    const kept = order[i]!;
    order[i] = order[j]!;
    order[j] = kept;
  }
  return order;
}
