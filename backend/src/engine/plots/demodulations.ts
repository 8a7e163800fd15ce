import type { AirValue, Demodulation } from '#shared/decode';
import type { AnalyseOptions, DeclaredSettings } from '../analyse.js';
import type { Look } from '../evidence/look.js';
import type { Order } from '../ofdm/constellation.js';
import { demodulateUnder } from '../ofdm/demodulate.js';
import { spreadDemodulation } from '../ofdm/spread-demodulation.js';
import type { DemodulationSettings } from '../ofdm/settings.js';

/**
 * The capture under the settings that it shows itself, then under each side's, all held against
 * the one order that the first decided: the smallest error over orders would close on anything.
 */
export function demodulations(look: Look, air: Readonly<Record<string, AirValue>>, { declared, onProgress }: AnalyseOptions): Demodulation[] {
  const own = ownSettings(air);
  const best = own ? spreadUnder(look, own) ?? under(look, own, { name: 'air', order: null }) : null;
  const order = (best?.order ?? 'qpsk') as Order;
  const done: Demodulation[] = best ? [best] : [];
  (['a', 'b'] as const).forEach((side, i) => {
    const settings = declared[side] && settingsOf(declared[side]);
    if (!settings) return;
    onProgress?.(side === 'a' ? 'under A' : 'under B', 0.75 + 0.1 * i);
    const same = done.find((d) => equal(d.settings, settings));
    done.push(same ? { ...same, under: side } : under(look, settings, { name: side, order }));
  });
  return [...done.filter((d) => d.under !== 'air'), ...done.filter((d) => d.under === 'air')];
}

/** A single carrier's points, which its subcarriers do not show; null for any other signal. */
function spreadUnder({ choice }: Look, settings: DemodulationSettings): Demodulation | null {
  const points = choice.finding?.spreadPoints;
  return points && points.length > 0 ? spreadDemodulation(points, settings) : null;
}

function under(look: Look, settings: DemodulationSettings, as: { name: 'a' | 'b' | 'air'; order: Order | null }): Demodulation {
  const grid = look.choice.finding?.grid ?? look.blind?.grid ?? null;
  return demodulateUnder(look.source, settings, { under: as.name, occupied: look.spectrum.occupied, order: as.order, grid });
}

function ownSettings(air: Readonly<Record<string, AirValue>>): DemodulationSettings | null {
  const spacing = air['subcarrierSpacingHz']?.value;
  if (typeof spacing !== 'number') return null;
  const word = air['cyclicPrefix']?.value;
  const seconds = air['cyclicPrefixS']?.value;
  return { subcarrierSpacingHz: spacing, cyclicPrefix: typeof word === 'string' ? word : null, cyclicPrefixS: typeof word !== 'string' && typeof seconds === 'number' ? seconds : null };
}

/** Null where a side says too little: the spacing is needed, a prefix that it does not state is the normal one. */
function settingsOf(declared: DeclaredSettings): DemodulationSettings | null {
  const { subcarrierSpacingHz, cyclicPrefix, guardIntervalS, fftSize } = declared;
  if (subcarrierSpacingHz === null) return null;
  return { subcarrierSpacingHz, cyclicPrefix: cyclicPrefix ?? (guardIntervalS === null ? 'normal' : null), cyclicPrefixS: cyclicPrefix === null ? guardIntervalS : null, fftSize };
}

function equal(done: Demodulation['settings'], settings: DemodulationSettings): boolean {
  const same = Math.abs(done.subcarrierSpacingHz / settings.subcarrierSpacingHz - 1) < 1e-6;
  return same && done.cyclicPrefix === settings.cyclicPrefix && (settings.cyclicPrefixS == null || Math.abs((done.cyclicPrefixS ?? 0) / settings.cyclicPrefixS - 1) < 0.02);
}
