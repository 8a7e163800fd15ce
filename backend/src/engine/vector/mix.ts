/** How many samples one exact phasor serves before the recurrence starts afresh; keeps its error below 1e-13. */
const RUN = 1024;

/**
 * `iq` (interleaved) moved up by `hz`: multiplied by exp(+j2π·hz·n/rateHz), n counted from
 * `startSample`, so that consecutive windows of one capture stay in phase. A new array.
 */
export function mix(iq: Float32Array, hz: number, rateHz: number, startSample = 0): Float32Array {
  const out = new Float32Array(iq.length);
  const samples = iq.length >> 1;
  const step = hz / rateHz;
  const stepRe = Math.cos(2 * Math.PI * step);
  const stepIm = Math.sin(2 * Math.PI * step);
  for (let from = 0; from < samples; from += RUN) {
    const angle = 2 * Math.PI * turns(step, startSample + from);
    let re = Math.cos(angle);
    let im = Math.sin(angle);
    const to = Math.min(samples, from + RUN);
    for (let n = from; n < to; n++) {
      const a = iq[2 * n];
      const b = iq[2 * n + 1];
      out[2 * n] = a * re - b * im;
      out[2 * n + 1] = a * im + b * re;
      const next = re * stepRe - im * stepIm;
      im = re * stepIm + im * stepRe;
      re = next;
    }
  }
  return out;
}

/** `step`·`n` less its whole turns: the angle keeps its digits far into a long capture. */
export function turns(step: number, n: number): number {
  const whole = Math.floor(n / 65_536);
  const high = step * 65_536;
  const rest = (high - Math.round(high)) * whole + step * (n - whole * 65_536);
  return rest - Math.round(rest);
}

/** The spectrum reversed (Q negated): what exchanging I and Q does, up to a constant phase. A new array. */
export function conjugate(iq: Float32Array): Float32Array {
  const out = new Float32Array(iq);
  for (let i = 1; i < out.length; i += 2) out[i] = -out[i];
  return out;
}
