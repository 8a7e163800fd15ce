import type { BlockChannel } from './block-channel.js';
import { broadcastLayout } from './block-layout.js';

/**
 * Log-likelihood ratios of the broadcast channel's 864 bits, positive for 0, in the order of
 * their mapping: 2√2·Re(y·h*)/σ² and the same of the imaginary part.
 */
export function blockRatios(grid: readonly Float64Array[], cellId: number, channel: BlockChannel): Float64Array {
  const elements = broadcastLayout(cellId).data;
  const ratios = new Float64Array(2 * elements.length);
  const scale = (2 * Math.SQRT2) / Math.max(channel.noisePower, 1e-4 * channel.signalPower);
  elements.forEach(({ symbol, subcarrier }, i) => {
    const a = grid[symbol][2 * subcarrier];
    const b = grid[symbol][2 * subcarrier + 1];
    const cos = Math.cos(channel.phases[symbol]);
    const sin = Math.sin(channel.phases[symbol]);
    const g = channel.gains[2 * subcarrier] * cos - channel.gains[2 * subcarrier + 1] * sin;
    const h = channel.gains[2 * subcarrier] * sin + channel.gains[2 * subcarrier + 1] * cos;
    ratios[2 * i] = scale * (a * g + b * h);
    ratios[2 * i + 1] = scale * (b * g - a * h);
  });
  return ratios;
}
