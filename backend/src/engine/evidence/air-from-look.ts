import type { AirValue } from '#shared/decode';
import type { BlindOfdm, LevelFacts, TechnologyFinding } from '../types.js';
import type { BlindEstimate } from '../sync/estimate.js';
import { halfShift } from './half-shift.js';
import type { Look } from './look.js';
import { occupiedBandwidth } from './occupied-value.js';

/** The contract's values from one look: a technology's own first, then what any OFDM shows. */
export function airFrom(look: Look, level: LevelFacts): Record<string, AirValue> {
  const { choice, blind } = look;
  if (choice.technology === null) return { technology: { value: null, reason: choice.reason } };
  const shown = blind && choice.finding === null ? ofAnyOfdm(blind) : {};
  return {
    ...shown,
    technology: { value: choice.technology, confidence: choice.confidence, method: choice.reason },
    occupiedBandwidthHz: occupiedBandwidth(look),
    ...signalToNoise(look),
    ...(level.dcOffsetDb !== null && { dcOffsetDb: { value: level.dcOffsetDb, confidence: 0.95, method: 'mean of the samples against the rest of their power' } }),
    ...(level.iqImbalanceDb !== null && { iqImbalanceDb: { value: level.iqImbalanceDb, confidence: 0.95, method: 'mean square of the complex samples: zero for a balanced receiver' } }),
    ...found(choice.finding?.air ?? {}),
    ...(choice.finding && numerologyOf(choice.finding, blind)),
    ...(choice.finding === null && blind && { halfSubcarrierShift: halfShift(look, blind) }),
  };
}

const NUMEROLOGY = ['subcarrierSpacingHz', 'usefulSymbolS', 'cyclicPrefix', 'cyclicPrefixS'];

/** The data's numerology: the technology's own statement, else its symbols' grid, else the blind look. */
function numerologyOf(finding: TechnologyFinding, blind: BlindEstimate | null): Record<string, AirValue> {
  if (finding.air['subcarrierSpacingHz']) return {};
  const { grid } = finding;
  if (!grid && blind?.blocksOnly) return Object.fromEntries(NUMEROLOGY.map((name) => [name, missing('only synchronisation blocks were seen, whose spacing need not be the data\'s')]));
  if (!grid) return blind ? pick(ofAnyOfdm(blind), NUMEROLOGY) : {};
  const method = 'repetition of the data\'s symbols in the frame of the decoded block';
  const known = (value: AirValue['value']): AirValue => ({ value, confidence: 0.99, method });
  const share = grid.prefixSamples.at(-1)! / grid.usefulSamples;
  return {
    subcarrierSpacingHz: known(grid.subcarrierSpacingHz),
    usefulSymbolS: known(1 / grid.subcarrierSpacingHz),
    cyclicPrefix: known(share > 0.2 ? 'extended' : 'normal'),
    cyclicPrefixS: known(share / grid.subcarrierSpacingHz),
  };
}

function pick(air: Record<string, AirValue>, names: readonly string[]): Record<string, AirValue> {
  return Object.fromEntries(names.map((name) => [name, air[name]!]));
}

/** What a detector left open does not replace what another measure says. */
function found(air: Readonly<Record<string, AirValue>>): Record<string, AirValue> {
  return Object.fromEntries(Object.entries(air).filter(([name, { value }]) => value !== null || name !== 'snrDb'));
}

function missing(reason: string): AirValue {
  return { value: null, reason };
}

function signalToNoise({ blind, spectrum }: Look): Record<string, AirValue> {
  const value = blind?.snrDb ?? spectrum.snrDb;
  return value === null ? {} : { snrDb: { value, confidence: 0.8, method: blind?.snrDb == null ? 'level inside the occupied band against the floor beside it' : 'likeness of the prefixes to the ends of their symbols' } };
}

function ofAnyOfdm(blind: BlindOfdm): Record<string, AirValue> {
  const method = 'repetition of the symbols\' ends in their prefixes';
  const known = (value: AirValue['value']): AirValue => ({ value, confidence: blind.confidence, method });
  const { subcarrierSpacingHz: spacing, grid } = blind;
  const residue = grid.referenceHz - spacing * Math.round(grid.referenceHz / spacing);
  return {
    subcarrierSpacingHz: known(spacing),
    usefulSymbolS: known(1 / spacing),
    cyclicPrefix: blind.cyclicPrefix === null ? missing('the prefix fits none of the standards\' tables') : known(blind.cyclicPrefix),
    cyclicPrefixS: known(blind.cyclicPrefixS),
    carrierOffsetHz: grid.placed ? known(grid.referenceHz) : { ...known(residue), method: `fractional: modulo the spacing, from the ${method}` },
  };
}
