/** Hash of whole numbers to [0, 1), the same everywhere and for ever (a 32-bit finaliser after Murmur3). */
export function hashed(...parts: readonly number[]): number {
  let h = 0x9e3779b9;
  for (const part of parts) {
    h ^= part | 0;
    h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
    h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
    h ^= h >>> 16;
  }
  return (h >>> 0) / 2 ** 32;
}

/** A number for a text, to seed with. */
export function seedOf(text: string): number {
  let h = 7;
  for (const letter of text) h = (Math.imul(h, 31) + (letter.codePointAt(0) ?? 0)) | 0;
  return h;
}

/** Smooth noise in [−1, 1] over a time axis: values at whole steps, eased between them; can be asked at any time. */
export function smoothNoise(seed: number, position: number): number {
  const step = Math.floor(position);
  const x = position - step;
  const ease = x * x * (3 - 2 * x);
  const [a, b] = [hashed(seed, step), hashed(seed, step + 1)];
  return 2 * (a + (b - a) * ease) - 1;
}

/** Nearly normal noise with sd 1: twelve uniform numbers less six (central limit). */
export function gaussian(seed: number, index: number): number {
  let sum = -6;
  for (let part = 0; part < 12; part++) sum += hashed(seed, index, part);
  return sum;
}
