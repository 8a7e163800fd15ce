import { extendedPrefix, normalPrefix, uniformPrefix, type Hypothesis } from '../sync/hypotheses.js';

/** The settings under which a capture is demodulated. */
export interface DemodulationSettings {
  readonly subcarrierSpacingHz: number;
  /** `normal`, `extended`, or for Wi-Fi `short`, `normal`, `double`, `quadruple`; null where only seconds are stated. */
  readonly cyclicPrefix: string | null;
  readonly cyclicPrefixS?: number | null;
  readonly fftSize?: number | null;
}

/** IEEE 802.11 guard intervals at 312.5 and 78.125 kHz, s; they scale with the clock at 10 MHz. */
const GUARD_INTERVALS: Readonly<Record<string, number>> = { short: 0.4e-6, normal: 0.8e-6, double: 1.6e-6, quadruple: 3.2e-6 };

/** The symbol pattern that the settings describe; null where they describe none. */
export function patternOf(settings: DemodulationSettings): Hypothesis | null {
  const { subcarrierSpacingHz: spacing, cyclicPrefix, cyclicPrefixS } = settings;
  if (!(spacing > 0)) return null;
  const mu = Math.log2(spacing / 15e3);
  const cellular = Math.abs(mu - Math.round(mu)) < 1e-3 && mu > -2 && mu < 7;
  if (cellular && cyclicPrefix === 'extended') return extendedPrefix(spacing);
  if (cellular && mu > -0.5 && (cyclicPrefix === 'normal' || cyclicPrefix === null) && !cyclicPrefixS) return normalPrefix(Math.round(mu));
  if (cyclicPrefixS) return uniformPrefix({ usefulS: 1 / spacing, cyclicPrefixS, family: 'free' });
  const clock = wifiClock(spacing);
  const guard = cyclicPrefix === null ? undefined : GUARD_INTERVALS[cyclicPrefix];
  if (clock && guard) return uniformPrefix({ usefulS: 1 / spacing, cyclicPrefixS: guard / clock, family: 'wifi' });
  return null;
}

function wifiClock(spacing: number): number | null {
  const clocks: [number, number][] = [[312.5e3, 1], [156.25e3, 0.5], [78.125e3, 1]];
  return clocks.find(([hz]) => Math.abs(spacing / hz - 1) < 1e-3)?.[1] ?? null;
}
