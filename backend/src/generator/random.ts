/**
 * Seeded random numbers: the same seed gives the same signal on any machine. The core is the
 * small fast counter generator with 128 bits of state (sfc32); seeds are spread by an integer hash,
 * so that neighbouring seeds give unrelated streams.
 */
export class Random {
  private a: number;
  private b: number;
  private c: number;
  private d = 1;
  private spare: number | null = null;

  /** Any whole numbers or words; together they name the stream. */
  constructor(...seed: readonly (number | string)[]) {
    this.a = hash(seed, 0x9e3779b9);
    this.b = hash(seed, 0x85ebca6b);
    this.c = hash(seed, 0xc2b2ae35);
    for (let i = 0; i < 12; i++) this.bits();
  }

  /** 32 random bits, unsigned. */
  bits(): number {
    const t = (((this.a + this.b) | 0) + this.d) | 0;
    this.d = (this.d + 1) | 0;
    this.a = this.b ^ (this.b >>> 9);
    this.b = (this.c + (this.c << 3)) | 0;
    this.c = ((this.c << 21) | (this.c >>> 11)) + t | 0;
    return t >>> 0;
  }

  /** Uniform in [0, 1). */
  unit(): number {
    return this.bits() / 4294967296;
  }

  uniform(low: number, high: number): number {
    return low + (high - low) * this.unit();
  }

  /** Whole number, both ends included. */
  integer(low: number, high: number): number {
    return low + Math.floor(this.unit() * (high - low + 1));
  }

  chance(probability: number): boolean {
    return this.unit() < probability;
  }

  pick<T>(from: readonly T[]): T {
    if (from.length === 0) throw new RangeError('nothing to pick from');
    return from[Math.floor(this.unit() * from.length)];
  }

  /** Gaussian, mean 0, variance 1 (polar method). */
  normal(): number {
    if (this.spare !== null) {
      const kept = this.spare;
      this.spare = null;
      return kept;
    }
    for (;;) {
      const u = 2 * this.unit() - 1;
      const v = 2 * this.unit() - 1;
      const s = u * u + v * v;
      if (s >= 1 || s === 0) continue;
      const scale = Math.sqrt((-2 * Math.log(s)) / s);
      this.spare = v * scale;
      return u * scale;
    }
  }
}

/** 32-bit FNV-1a over the parts, finished with an avalanche. */
function hash(parts: readonly (number | string)[], salt: number): number {
  let h = (0x811c9dc5 ^ salt) | 0;
  for (const part of parts) {
    const text = `${part}|`;
    for (let i = 0; i < text.length; i++) h = Math.imul(h ^ text.charCodeAt(i), 0x01000193);
  }
  h = Math.imul(h ^ (h >>> 16), 0x7feb352d);
  h = Math.imul(h ^ (h >>> 15), 0x846ca68b);
  return (h ^ (h >>> 16)) | 0;
}
