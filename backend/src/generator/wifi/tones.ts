/** One tone: subcarrier against the channel's centre, real and imaginary part. */
export type Tone = readonly [k: number, re: number, im: number];
export type WifiBandwidthMhz = 20 | 40 | 80 | 160;

/** Subcarriers `from` to `to`, both included. */
export function span(from: number, to: number): number[] {
  return Array.from({ length: to - from + 1 }, (_, i) => from + i);
}

const both = (low: number, high: number) => [...span(-high, -low), ...span(low, high)];
const mirrored = (positive: readonly number[]) => [...positive.map((k) => -k).reverse(), ...positive];
/** The set of an 80 MHz half, moved to both halves of 160 MHz. */
const doubled = (half: readonly number[], by: number) => [...half.map((k) => k - by), ...half.map((k) => k + by)];

/** Tones and pilots of the formats (IEEE 802.11 Tables 17-5, 19-6, 21-5, 27-9 and following). */
export interface ToneSet {
  readonly used: readonly number[];
  readonly pilots: readonly number[];
}

export const LEGACY: ToneSet = { used: both(1, 26), pilots: [-21, -7, 7, 21] };

const vht80: ToneSet = { used: both(2, 122), pilots: mirrored([11, 39, 75, 103]) };
export const HT_VHT: Record<WifiBandwidthMhz, ToneSet> = {
  20: { used: both(1, 28), pilots: [-21, -7, 7, 21] },
  40: { used: both(2, 58), pilots: mirrored([11, 25, 53]) },
  80: vht80,
  160: { used: doubled(vht80.used, 128), pilots: doubled(vht80.pilots, 128) },
};

const he80: ToneSet = { used: both(3, 500), pilots: mirrored([24, 92, 158, 226, 266, 334, 400, 468]) };
export const HE: Record<WifiBandwidthMhz, ToneSet> = {
  20: { used: both(2, 122), pilots: mirrored([22, 48, 90, 116]) },
  40: { used: both(3, 244), pilots: mirrored([10, 36, 78, 104, 144, 170, 212, 238]) },
  80: he80,
  160: { used: doubled(he80.used, 512), pilots: doubled(he80.pilots, 512) },
};

/** Values of the pilots in the first symbol, in ascending order of tones (clauses 17.3.5.9, 19.3.11.10, 21.3.10.10, 27.3.12.13). */
export function pilotPattern(count: number): number[] {
  const eight = [1, 1, 1, -1, -1, 1, 1, 1];
  if (count === 4) return [1, 1, 1, -1];
  if (count === 6) return [1, 1, 1, -1, -1, 1];
  return Array.from({ length: count }, (_, i) => eight[i % 8]);
}

/** Turn of the 20 MHz parts against each other (clauses 19.3.9.3, 21.3.7.5), by 312.5 kHz subcarrier. */
export function rotated(tones: readonly Tone[], mhz: WifiBandwidthMhz, perUnit = 1): Tone[] {
  return tones.map(([k, re, im]) => {
    const unit = k / perUnit;
    if (mhz === 40) return unit >= 0 ? [k, -im, re] : [k, re, im];
    if (mhz === 80) return unit >= -64 ? [k, -re, -im] : [k, re, im];
    if (mhz === 160) return unit < -192 || (unit >= 0 && unit < 64) ? [k, re, im] : [k, -re, -im];
    return [k, re, im];
  });
}

/** A 20 MHz field repeated on every 20 MHz of the channel, each part turned. */
export function duplicated(tones: readonly Tone[], mhz: WifiBandwidthMhz): Tone[] {
  const parts = mhz / 20;
  const copies = Array.from({ length: parts }, (_, p) => 64 * p - 32 * (parts - 1));
  return rotated(copies.flatMap((shift) => tones.map(([k, re, im]): Tone => [k + shift, re, im])), mhz);
}
