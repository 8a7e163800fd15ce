import type { DetectionContext, TechnologyFinding, Tried } from '../types.js';
import { decodeBurst } from './burst-decode.js';
import { followCell } from './cell.js';
import { findBlock } from './find-block.js';
import { reportBlock, reportCell } from './finding.js';
import { measureCell } from './measure-cell.js';
import { choosePattern } from './pattern-choice.js';

/**
 * 5G NR downlink: searches the synchronisation block (any spacing, frequency and sense of the
 * spectrum), decodes its broadcast channel, and measures what the decoded blocks allow to measure.
 * Null where no block stands up to its three signals. All frequencies are those of the upright
 * capture. TS 38.211, 38.212, 38.213.
 */
export function detectNr(context: DetectionContext): TechnologyFinding | null {
  const finding = findBlock(context);
  if (!finding) return null;
  const { reader } = finding;
  context.onProgress?.('NR broadcast channel', 0.5);
  const decoded = decodeBurst(reader, finding.block);
  if (!decoded) return reportBlock(context, finding.block);
  const { block } = decoded;
  const { centreFrequencyHz: centreHz, sampleRateHz } = context.source;
  const choice = choosePattern(reader, block, { decoded, blind: context.blind, centreHz, sampleRateHz });
  context.onProgress?.('NR cell', 0.7);
  const cell = followCell(reader, block, decoded, choice.hypothesis);
  const tried: Tried[] = [{ what: 'NR synchronisation-block pattern', result: choice.method }];
  return reportCell(context, { block, decoded, cell, measured: measureCell(context, { cell, work: finding.work, decoded, inverted: block.inverted }), tried });
}
