import type { AirValue } from '#shared/decode';
import type { DetectionContext, SymbolGrid, TechnologyFinding, Tried } from '../types.js';
import type { FoundBlock } from './block-search.js';
import type { DecodedBroadcast } from './burst-decode.js';
import type { Cell } from './cell.js';
import type { ClockDrift } from './clock-drift.js';
import type { CellMeasurements } from './measure-cell.js';
import { numerologyOf, prefixSamples } from './numerology.js';
import { nominalFrequency } from './phase-laws.js';
import { carrierValues, clockValue, phaseValue, qualityValues, unknown } from './finding-values.js';

/** A block without a decoded broadcast channel is another's or a chance's in this share of cases. */
const BLOCK_ALONE = 0.99;
const DECODED = 0.9999;

/** A block was found, but nothing decoded: what the synchronisation signals say. */
export function reportBlock(context: DetectionContext, block: FoundBlock): TechnologyFinding {
  const undecoded = 'the broadcast channel’s CRC does not pass in the blocks captured';
  return {
    technology: 'nr',
    confidence: BLOCK_ALONE,
    spectrumInverted: block.inverted,
    air: {
      ...blockValues(context, { block, referenceHz: block.referenceHz, confidence: BLOCK_ALONE, clock: null }),
      mib: unknown(undecoded),
      systemFrameNumber: unknown(undecoded),
      kSsb: unknown(undecoded),
      phaseCompensation: unknown(undecoded),
      carrierOffsetHz: unknown(undecoded),
    },
    announced: { ...announcedByBlock(block) },
    grid: null,
    tried: [{ what: `NR broadcast channel of cell ${block.cellId}`, result: undecoded }],
  };
}

/** Everything that a decoded cell says. */
export function reportCell(
  context: DetectionContext,
  { block, decoded, cell, measured, tried }: { block: FoundBlock; decoded: DecodedBroadcast; cell: Cell; measured: CellMeasurements; tried: readonly Tried[] },
): TechnologyFinding {
  const { information } = decoded;
  const first = cell.blocks[0];
  const systemFrameNumber = first?.systemFrameNumber ?? information.systemFrameNumber;
  const mib = {
    systemFrameNumber,
    subCarrierSpacingCommon: information.subCarrierSpacingCommon,
    ...(measured.commonGrid ? { subCarrierSpacingCommonHz: measured.commonGrid.spacingHz } : {}),
    ssbSubcarrierOffset: information.ssbSubcarrierOffset,
    dmrsTypeAPosition: information.dmrsTypeAPosition,
    pdcchConfigSIB1: information.pdcchConfigSIB1,
    cellBarred: information.cellBarred,
    intraFreqReselection: information.intraFreqReselection,
    halfFrame: first?.halfFrame ?? information.halfFrame,
    ssbIndex: first?.blockIndex ?? cell.hypothesis.blockIndex,
  };
  const crc = `broadcast channel, CRC passed (${decoded.combined === 1 ? 'one block' : `${decoded.combined} blocks added up`})`;
  const sure = (value: AirValue['value']): AirValue => ({ value, confidence: DECODED, method: crc });
  return {
    technology: 'nr',
    confidence: DECODED,
    spectrumInverted: block.inverted,
    air: {
      ...blockValues(context, { block, referenceHz: measured.reference.estimate.hz, confidence: DECODED, clock: measured.clock }),
      mib: sure(mib),
      systemFrameNumber: sure(systemFrameNumber),
      kSsb: sure(information.kSsb),
      frameStartS: sure(cell.frameStartS),
      ...carrierValues(measured),
      ...qualityValues(cell, measured.placement),
      sampleClockOffsetPpm: clockValue(measured.clock),
      phaseCompensation: phaseValue(measured.phases, cell),
    },
    announced: {
      ...announcedByBlock(block),
      dmrsTypeAPosition: information.dmrsTypeAPosition,
      kSsb: information.kSsb,
      systemFrameNumber,
      subCarrierSpacingCommon: information.subCarrierSpacingCommon,
      ...(measured.commonGrid && measured.commonGrid.spacingHz === measured.data?.spacingHz ? { subcarrierSpacing: measured.commonGrid.spacingHz } : {}),
    },
    grid: dataGrid(context, cell, measured),
    tried: [...tried, blocksFound(cell)],
  };
}

function announcedByBlock(block: FoundBlock): Record<string, number> {
  return { physicalCellId: block.cellId, ssbSubcarrierSpacing: block.spacingHz };
}

function blockValues(context: DetectionContext, { block, referenceHz, confidence, clock }: { block: FoundBlock; referenceHz: number; confidence: number; clock: ClockDrift | null }): Record<string, AirValue> {
  const { centreFrequencyHz } = context.source;
  const statistics = `primary ${block.primaryStatistic.toFixed(0)} of 127, secondary ${block.secondaryStatistic.toFixed(0)} of 127, reference signal ${block.reference.statistic.toFixed(0)} of 144`;
  const method = `synchronisation signals and the broadcast channel's reference signal (${statistics})`;
  const nominalHz = centreFrequencyHz === null ? null : nominalFrequency(centreFrequencyHz + referenceHz, clock);
  return {
    technology: { value: 'nr', confidence, method },
    physicalCellId: { value: block.cellId, confidence, method },
    ssbSubcarrierSpacingHz: { value: block.spacingHz, confidence, method },
    spectrumInverted: { value: block.inverted, confidence, method: 'the sense in which the synchronisation signals fit' },
    ssbOffsetHz: { value: referenceHz, confidence, method: 'SS_REF against the capture’s zero' },
    ssbFrequencyHz: centreFrequencyHz === null
      ? unknown('the capture does not say its centre frequency')
      : { value: centreFrequencyHz + referenceHz, confidence, method: 'stated centre and SS_REF as received', nominalHz },
  };
}

function blocksFound(cell: Cell): Tried {
  const shown = cell.blocks.slice(0, 12).map((b) => `block ${b.blockIndex} of half frame ${b.halfFrame} in frame ${b.systemFrameNumber} at ${(b.usefulS * 1e3).toFixed(3)} ms (reference signal ${b.statistic.toFixed(0)} of 144)`);
  return { what: `NR synchronisation blocks of cell ${cell.cellId}`, result: `${cell.blocks.length} found: ${shown.join('; ')}${cell.blocks.length > shown.length ? '; ...' : ''}` };
}

/** The data's grid from the first subframe that starts in the capture, or null where the data's numerology is not known. */
function dataGrid(context: DetectionContext, cell: Cell, { data, placement, placed, commonGrid }: CellMeasurements): SymbolGrid | null {
  if (!data) return null;
  const { sampleRateHz } = context.source;
  const startS = ((cell.frameStartS % 0.001) + 0.001) % 0.001;
  return {
    startSample: startS * sampleRateHz,
    usefulSamples: sampleRateHz / data.spacingHz,
    prefixSamples: prefixSamples(numerologyOf(data.spacingHz)!, sampleRateHz, data.extended),
    subcarrierSpacingHz: data.spacingHz,
    referenceHz: placed && placement ? placement.referenceHz : commonGrid ? commonGrid.edgeHz : cell.reference.hz,
    placed,
  };
}
