/**
 * Fraction of samples whose I or Q stands at the rail. The rail is the greatest magnitude seen:
 * clipping shows as a pile of values exactly there (or within one quantisation step), many times
 * denser than just below it. A waveform that is not clipped thins out towards its peak, however
 * coarse the samples, and counts 0.
 */
export function clippedFraction(iq: Float32Array): number {
  const samples = iq.length >> 1;
  if (samples < 16) return 0;
  let peak = 0;
  for (let i = 0; i < iq.length; i++) peak = Math.max(peak, Math.abs(iq[i]));
  if (!(peak > 0)) return 0;
  const rail = peak * (1 - 1e-4);
  const { at, below } = pileUp(iq, { rail, from: 0.96 * peak });
  // Four per cent below the rail hold less than the rail itself: no Gaussian tail does that.
  return at >= 4 && at > below ? samplesAt(iq, rail) / samples : 0;
}

function pileUp(iq: Float32Array, { rail, from }: { rail: number; from: number }): { at: number; below: number } {
  let at = 0;
  let below = 0;
  for (let i = 0; i < iq.length; i++) {
    const a = Math.abs(iq[i]);
    if (a >= rail) at++;
    else if (a >= from) below++;
  }
  return { at, below };
}

function samplesAt(iq: Float32Array, rail: number): number {
  let count = 0;
  for (let i = 0; i < iq.length; i += 2) if (Math.abs(iq[i]) >= rail || Math.abs(iq[i + 1]) >= rail) count++;
  return count;
}
