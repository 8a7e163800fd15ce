/**
 * Fraction of samples whose I or Q stands at a rail. The rails are the greatest and the least value
 * seen (signed integers reach one step further down than up): clipping shows as a pile of values
 * exactly there, many times denser than just below it. A waveform that is not clipped thins out
 * towards its peak, however coarse the samples, and counts 0.
 */
export function clippedFraction(iq: Float32Array): number {
  const samples = iq.length >> 1;
  if (samples < 16) return 0;
  const rails = railsOf(iq);
  if (!(rails.high > 0) || !(rails.low < 0)) return 0;
  const { at, below } = pileUp(iq, rails);
  // Four per cent below the rails hold less than the rails themselves: no Gaussian tail does that.
  return at >= 4 && at > below ? samplesAt(iq, rails) / samples : 0;
}

interface Rails { readonly high: number; readonly low: number }

const EXACT = 1 - 1e-4;
const JUST_BELOW = 0.96;

function railsOf(iq: Float32Array): Rails {
  let high = 0;
  let low = 0;
  for (let i = 0; i < iq.length; i++) {
    if (iq[i] > high) high = iq[i];
    else if (iq[i] < low) low = iq[i];
  }
  // Noise that never reaches the one rail leaves its greatest value far inside.
  const reach = Math.max(high, -low);
  return { high: high > 0.5 * reach ? high : reach, low: -low > 0.5 * reach ? low : -reach };
}

function pileUp(iq: Float32Array, { high, low }: Rails): { at: number; below: number } {
  let at = 0;
  let below = 0;
  for (let i = 0; i < iq.length; i++) {
    const part = iq[i] > 0 ? iq[i] / high : iq[i] / low;
    if (part >= EXACT) at++;
    else if (part >= JUST_BELOW) below++;
  }
  return { at, below };
}

function samplesAt(iq: Float32Array, { high, low }: Rails): number {
  const railed = (x: number): boolean => (x > 0 ? x >= high * EXACT : x <= low * EXACT);
  let count = 0;
  for (let i = 0; i < iq.length; i += 2) if (railed(iq[i]) || railed(iq[i + 1])) count++;
  return count;
}
