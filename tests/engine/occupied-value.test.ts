import { describe, expect, it } from 'vitest';
import { occupiedBandwidth } from '#engine/evidence/occupied-value';
import type { Look } from '#engine/evidence/look';

const look = (occupiedBandwidthHz: number | null, finding: { technology: string; air: Record<string, { value: unknown }> } | null): Look =>
  ({ spectrum: { occupiedBandwidthHz }, choice: { finding } }) as unknown as Look;

describe('the occupied bandwidth', () => {
  // TS 38.211 clause 7.4.2: synchronisation signals of 127 subcarriers; TS 36.211 clause 6.11: of 62.
  const nr = { technology: 'nr', air: { ssbSubcarrierSpacingHz: { value: 30_000 } } };
  const lte = { technology: 'lte', air: {} };
  const wifi = { technology: 'wifi', air: { channelBandwidthHz: { value: 20e6 } } };

  it.each([['NR', nr, 127 * 30e3], ['LTE', lte, 62 * 15e3], ['Wi-Fi', wifi, 15e6]] as const)('of %s is never less than what was decoded', (_, finding, least) => {
    expect(occupiedBandwidth(look(0.98 * least, finding))).toEqual({ value: null, reason: 'the signal fills the capture: less stands out than was decoded' });
    expect(occupiedBandwidth(look(1.02 * least, finding)).value).toBe(1.02 * least);
  });

  it('is what stands out where nothing was decoded, and nothing where nothing does', () => {
    expect(occupiedBandwidth(look(180e3, null)).value).toBe(180e3);
    expect(occupiedBandwidth(look(null, nr)).value).toBeNull();
  });

  it('of an LTE uplink may be a single resource block', () => {
    expect(occupiedBandwidth(look(180e3, { technology: 'lte', air: { direction: { value: 'uplink' } } })).value).toBe(180e3);
  });
});
