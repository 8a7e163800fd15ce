import type { NotPermitted } from '../types.js';
import { bandwidthTable, spacingHz } from '../compare/derive.js';
import type { View } from '../compare/view.js';
import { channelBandwidths, maxResourceBlocks } from '../standards/bandwidths.js';

const MHz = (hz: number): string => `${Number((hz / 1e6).toFixed(3))} MHz`;

/** No more blocks than the channel holds at this spacing (fewer are allowed), and no channel that the table lacks. */
export function width(view: View): NotPermitted[] {
  const table = bandwidthTable(view);
  if (table === null) return [];
  const bandwidth = view.number('channelBandwidth');
  const blocks = view.number('resourceBlocks');
  const clause = table === 'lte' ? 'TS 36.104, table 5.6-1' : `TS 38.104, table 5.3.2-${table === 'FR1' ? 1 : 2}`;
  if (bandwidth !== null && !channelBandwidths(table).includes(bandwidth)) {
    return [{ parameter: view.named('channelBandwidth'), clause, note: `${table === 'lte' ? 'LTE' : `NR in ${table}`} has no channel of ${MHz(bandwidth)}` }];
  }
  return [...(blocks === null ? [] : blockCount(view, { table, blocks, clause })), ...fit(view, clause)];
}

const LTE_BLOCKS = [6, 15, 25, 50, 75, 100];

function blockCount(view: View, { table, blocks, clause }: { table: string; blocks: number; clause: string }): NotPermitted[] {
  const parameter = view.named('resourceBlocks');
  if (table === 'lte') return LTE_BLOCKS.includes(blocks) ? [] : [{ parameter, clause, note: `LTE has no carrier of ${blocks} blocks` }];
  return blocks >= 1 && blocks <= 275 ? [] : [{ parameter, clause: 'TS 38.211, clause 4.4.2', note: `a carrier has 1 to 275 blocks, not ${blocks}` }];
}

function fit(view: View, clause: string): NotPermitted[] {
  const table = bandwidthTable(view);
  const [bandwidth, blocks, spacing] = [view.number('channelBandwidth'), view.number('resourceBlocks'), spacingHz(view)];
  if (table === null || bandwidth === null || spacing === null) return [];
  // A spacing that no table has comes from a clock or a transform at odds: that is the finding, not the channel.
  if (!Number.isInteger(Math.log2(spacing / 15e3))) return [];
  const most = maxResourceBlocks(table, spacing, bandwidth);
  if (most === null) {
    const other = otherTable(table);
    // Where the frequency is not stated the range is a guess: only what neither range has is off standard.
    if (other !== null && maxResourceBlocks(other, spacing, bandwidth) !== null) return [];
    return [{ parameter: view.named('channelBandwidth'), clause, note: `there is no channel of ${MHz(bandwidth)} at ${spacing / 1e3} kHz`, together: [view.named('subcarrierSpacing')] }];
  }
  if (blocks === null || blocks <= most) return [];
  return [{ parameter: view.named('resourceBlocks'), clause, note: `${blocks} blocks do not fit ${MHz(bandwidth)} at ${spacing / 1e3} kHz, which holds ${most}`, together: [view.named('channelBandwidth'), view.named('subcarrierSpacing')] }];
}

const otherTable = (table: 'FR1' | 'FR2' | 'lte'): 'FR1' | 'FR2' | null => (table === 'lte' ? null : table === 'FR1' ? 'FR2' : 'FR1');
