/** Mean power of interleaved samples; 1 is a complex tone at full scale. 0 for no samples. */
export function meanPower(iq: Float32Array, from = 0, to = iq.length >> 1): number {
  if (to <= from) return 0;
  let sum = 0;
  for (let i = 2 * from; i < 2 * to; i++) sum += iq[i] * iq[i];
  return sum / (to - from);
}

/** Mean power of each whole block of `block` samples; a rest shorter than a block is left out. */
export function blockPowers(iq: Float32Array, block: number): Float64Array {
  const blocks = Math.floor(iq.length / 2 / block);
  const out = new Float64Array(blocks);
  for (let b = 0; b < blocks; b++) out[b] = meanPower(iq, b * block, (b + 1) * block);
  return out;
}

/** Mean of interleaved samples (the DC term), as [re, im]. */
export function mean(iq: Float32Array): [number, number] {
  let re = 0;
  let im = 0;
  for (let i = 0; i < iq.length; i += 2) {
    re += iq[i];
    im += iq[i + 1];
  }
  const n = Math.max(1, iq.length >> 1);
  return [re / n, im / n];
}

/** Power ratio in dB; −Infinity for 0. */
export function decibels(ratio: number): number {
  return 10 * Math.log10(ratio);
}

export function fromDecibels(db: number): number {
  return 10 ** (db / 10);
}
