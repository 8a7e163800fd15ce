import { nrArfcn, nrArfcnHz } from '../nr/raster.js';
import type { Random } from '../random.js';
import type { Declared, DeclaredName } from '../snapshots/declared.js';
import type { SnapshotStyle } from '../snapshots/snapshot.js';
import { NR_BANDS } from './nr-bands.js';
import type { SideSpec } from './scenario.js';

/** What a side must say, and in which words it may. */
export interface SideWish {
  readonly must: readonly DeclaredName[];
  readonly never: readonly DeclaredName[];
  /** The standards' field names may be used: they say spacing, carrier and blocks whatever is wished. */
  readonly standard: boolean;
}

/** A side that states part of what it knows, in words and a syntax of its own. */
export function drawSide(random: Random, declared: Declared, wish: SideWish): SideSpec {
  const style = drawStyle(random, declared, wish);
  if (style.words === 'standard') return { declared: without(declared, wish.never), style };
  return { declared: part(random, declared, wish), style };
}

function drawStyle(random: Random, declared: Declared, wish: SideWish): SnapshotStyle {
  const isCellular = declared.technology === 'nr' || declared.technology === 'lte';
  const words = random.pick(wish.standard && isCellular ? (['plain', 'plain', 'standard', 'standard', 'own'] as const) : (['plain', 'plain', 'own'] as const));
  if (words === 'standard') return { words, syntax: random.pick(['json', 'yaml', 'xml', 'braces'] as const), xer: random.chance(0.6), uplinkShiftHz: random.chance(0.4) ? uplinkShift(declared.band) : null };
  if (words === 'own') return { words, syntax: random.pick(['json', 'yaml', 'conf', 'braces'] as const), glossarySyntax: random.pick(['yaml', 'json'] as const), seed: random.bits() };
  const syntax = random.pick(['json', 'yaml', 'xml', 'conf', 'braces'] as const);
  return {
    words, syntax,
    plain: { spelling: random.pick(['camel', 'snake', 'kebab'] as const), units: random.pick(['si', 'in-name', 'in-value'] as const), numerology: random.chance(0.3), grouped: syntax === 'xml' || random.chance(0.8) },
  };
}

/** Where the band's uplink lies against its downlink. */
function uplinkShift(band: number | undefined): number | null {
  return NR_BANDS.find((b) => b.band === band)?.uplinkShiftHz ?? null;
}

const without = (declared: Declared, names: readonly DeclaredName[]): Declared =>
  Object.fromEntries(Object.entries(declared).filter(([name]) => !names.includes(name as DeclaredName)));

/** Each thing is said in one way; some are left out. */
function part(random: Random, declared: Declared, wish: SideWish): Declared {
  const kept = new Set<DeclaredName>(wish.must);
  for (const name of Object.keys(declared) as DeclaredName[]) if (random.chance(name === 'technology' ? 0.85 : 0.65)) kept.add(name);
  oneOf(random, kept, { names: ['ssbArfcn', 'gscn'], must: wish.must });
  oneOf(random, kept, { names: ['guardInterval', 'cyclicPrefix'], must: wish.must, when: declared.technology === 'wifi' });
  oneOf(random, kept, { names: ['earfcn', 'carrierFrequency'], must: wish.must });
  together(kept, ['fftSize', 'sampleRate']);
  together(kept, ['tddPeriodicity', 'tddDownlinkSlots', 'tddDownlinkSymbols', 'tddUplinkSlots', 'tddUplinkSymbols']);
  together(kept, ['tddSubframeAssignment', 'tddSpecialSubframe']);
  const said = Object.fromEntries(Object.entries(declared).filter(([name]) => kept.has(name as DeclaredName) && !wish.never.includes(name as DeclaredName))) as Declared;
  const carrier = said.carrierFrequency;
  if (declared.technology === 'nr' && carrier !== undefined && nrArfcnHz(nrArfcn(carrier)) === carrier && random.chance(0.4)) {
    return { ...without(said, ['carrierFrequency']), nrArfcn: nrArfcn(carrier) };
  }
  return said;
}

function oneOf(random: Random, kept: Set<DeclaredName>, { names, must, when = true }: { names: readonly DeclaredName[]; must: readonly DeclaredName[]; when?: boolean }): void {
  if (!when || !names.every((n) => kept.has(n))) return;
  const forced = names.find((n) => must.includes(n));
  const chosen = forced ?? random.pick(names);
  for (const n of names) if (n !== chosen) kept.delete(n);
}

function together(kept: Set<DeclaredName>, names: readonly DeclaredName[]): void {
  if (names.some((n) => kept.has(n))) for (const n of names) kept.add(n);
}
