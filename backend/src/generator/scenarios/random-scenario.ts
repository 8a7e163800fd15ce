import type { HintSide, Side } from '#shared/vocabulary';
import { Random } from '../random.js';
import type { Declared } from '../snapshots/declared.js';
import { CAPTURE_FAULTS } from './capture-faults.js';
import { DECLARED_FAULTS, type DeclaredFault } from './declared-faults.js';
import { drawLte } from './draw-lte.js';
import { drawNr } from './draw-nr.js';
import { drawNotOfdm, drawOwnOfdm } from './draw-ofdm.js';
import { drawWifi } from './draw-wifi.js';
import type { Drawn, Wish } from './drawn.js';
import type { Expectation } from './expectation.js';
import { nrAir } from './nr-air.js';
import type { ScenarioSpec, SideSpec } from './scenario.js';
import { drawSide, type SideWish } from './sides.js';

export const KINDS = ['nr', 'lte', 'lte-uplink', 'wifi', 'ofdm', 'nothing'] as const;
export type ScenarioKind = (typeof KINDS)[number];
export const RELATIONS = ['clean', 'one-wrong', 'both-wrong', 'agreed', 'one-sided', 'capture', 'snapshots-only', 'capture-only'] as const;
export type Relation = (typeof RELATIONS)[number];

export interface ScenarioOptions extends Wish {
  readonly kind?: ScenarioKind;
  readonly relation?: Relation;
  /** Name of a fault in `DECLARED_FAULTS` or `CAPTURE_FAULTS`, or a hint code. */
  readonly fault?: string;
}

/** A scenario by its number alone: the same seed and options, the same scenario. Throws RangeError where the options leave none. */
export function randomScenario(seed: number, options: ScenarioOptions = {}): ScenarioSpec {
  const random = new Random(seed, 'scenario');
  for (let tries = 0; tries < 500; tries++) {
    const kind = options.kind ?? random.pick(['nr', 'nr', 'nr', 'nr', 'nr', 'lte', 'wifi', 'ofdm', 'lte-uplink', 'nothing'] as const);
    const relation = options.relation ?? random.pick(['clean', 'clean', 'one-wrong', 'one-wrong', 'one-wrong', 'one-wrong', 'both-wrong', 'agreed', 'one-sided', 'capture', 'snapshots-only', 'capture-only'] as const);
    const spec = attempt(random, { kind, relation, options, id: `s${seed}` });
    if (spec) return spec;
  }
  throw new RangeError(`no scenario has ${JSON.stringify(options)}`);
}

interface Attempt {
  readonly kind: ScenarioKind;
  readonly relation: Relation;
  readonly options: ScenarioOptions;
  readonly id: string;
}

function attempt(random: Random, { kind, relation, options, id }: Attempt): ScenarioSpec | null {
  if (kind === 'nothing') return nothingThere(random, options, id);
  if (relation === 'capture') return captureAtFault(random, { kind, options, id });
  const fault = relation === 'clean' || relation === 'capture-only' ? null : pickFault(random, kind, options.fault);
  if (fault === undefined) return null;
  const drawn = draw(random, kind, { ...fault?.wish?.(random), ...(kind === 'lte-uplink' ? { uplink: true } : {}), ...options });
  if (!drawn) return null;
  if (relation === 'capture-only') return { ...frame(random, drawn, { id, group: 'capture-only', about: 'no snapshot' }), sideA: null, sideB: null, expect: { hint: null, allowed: [], air: drawn.air } };
  return fault ? withFault(random, { drawn, fault, relation, id }) : clean(random, drawn, id);
}

function draw(random: Random, kind: ScenarioKind, wish: Wish): Drawn | null {
  switch (kind) {
    case 'nr': return drawNr(random, wish);
    case 'lte': return drawLte(random, wish);
    case 'lte-uplink': return drawLte(random, { ...wish, uplink: true });
    case 'wifi': return drawWifi(random, wish);
    case 'ofdm': return drawOwnOfdm(random, wish);
    case 'nothing': return drawNotOfdm(random, wish);
  }
}

/** Undefined: this kind of signal has no such fault. */
function pickFault(random: Random, kind: ScenarioKind, wanted: string | undefined): DeclaredFault | undefined {
  const fitting = DECLARED_FAULTS.filter((f) => f.kinds.includes(kind as DeclaredFault['kinds'][number]) && (wanted === undefined || f.name === wanted || f.code === wanted));
  return fitting.length === 0 ? undefined : random.pick(fitting);
}

function frame(random: Random, drawn: Drawn, { id, group, about }: { id: string; group: string; about: string }) {
  const transmitter: Side | null = random.pick(['a', 'b', null, null] as const);
  return { id, group, about: `${drawn.label}; ${about}`, capture: drawn.capture, transmitter };
}

const FREE: SideWish = { must: [], never: [], standard: true };

function clean(random: Random, drawn: Drawn, id: string): ScenarioSpec {
  const wish = drawn.signal.kind === 'lte-uplink' ? { ...FREE, standard: false } : FREE;
  // An inverted recording is right only where somebody says so.
  const must: SideWish = drawn.declared.spectrumSense === 'inverted' ? { ...wish, must: ['spectrumSense'], standard: false } : wish;
  return {
    ...frame(random, drawn, { id, group: 'matched', about: 'both snapshots say the same' }),
    sideA: drawSide(random, drawn.declared, must), sideB: drawSide(random, drawn.declared, must),
    expect: { hint: null, allowed: [], air: drawn.air },
  };
}

function withFault(random: Random, { drawn, fault, relation, id }: { drawn: Drawn; fault: DeclaredFault; relation: Relation; id: string }): ScenarioSpec | null {
  const wrong = fault.deviate(drawn, random);
  if (!wrong || (fault.told === 'nothing' && relation !== 'one-wrong' && relation !== 'snapshots-only')) return null;
  const alsoWrong = relation === 'both-wrong' ? secondWrong(random, { drawn, fault, wrong }) : null;
  if (relation === 'both-wrong' && !alsoWrong) return null;
  const wish: SideWish = { must: fault.must, never: fault.never ?? [], standard: fault.standard };
  const letter = random.pick(['a', 'b'] as const);
  const side = (declared: Declared): SideSpec => drawSide(random, declared, wish);
  const base = frame(random, drawn, { id, group: fault.code, about: `${fault.name}: ${relation}, side ${letter}` });
  const isAgreed = relation === 'agreed';
  const other = relation === 'one-sided' ? null : side(alsoWrong ?? (isAgreed ? wrong : drawn.declared));
  const sides = letter === 'a' ? { sideA: side(wrong), sideB: other } : { sideA: other, sideB: side(wrong) };
  const isAlone = relation === 'snapshots-only';
  const found: HintSide[] = alsoWrong ? ['both'] : isAgreed ? agreedSides(fault, base.transmitter) : sidesOf(fault, letter, isAlone);
  const expect: Expectation = {
    hint: { code: fault.code, side: found },
    allowed: (fault.allowed ?? []).map((code) => ({ code, side: found })),
    air: isAlone ? {} : drawn.air,
  };
  return { ...base, capture: isAlone ? null : base.capture, ...(isAlone ? { transmitter: null } : {}), ...sides, expect };
}

/** A wrong setting that differs from the first; only where the air shows that both are. */
function secondWrong(random: Random, { drawn, fault, wrong }: { drawn: Drawn; fault: DeclaredFault; wrong: Declared }): Declared | null {
  if (fault.told !== 'air' || fault.code === 'not-permitted') return null;
  const [name] = fault.must;
  for (let tries = 0; tries < 10; tries++) {
    const other = fault.deviate(drawn, random);
    if (other && other[name] !== wrong[name]) return other;
  }
  return null;
}

/** What the standard does not allow is each side's own; what the air contradicts is the transmitter's. */
function agreedSides(fault: DeclaredFault, transmitter: Side | null): HintSide[] {
  return [fault.code === 'not-permitted' ? 'both' : transmitter ?? 'unknown'];
}

function sidesOf(fault: DeclaredFault, letter: Side, isAlone: boolean): HintSide[] {
  if (fault.code === 'not-permitted') return [letter];
  if (isAlone || fault.told === 'nothing') return fault.name === 'block period' && !isAlone ? ['unknown', letter] : ['unknown'];
  return fault.told === 'maybe' ? [letter, 'unknown'] : [letter];
}

function captureAtFault(random: Random, { kind, options, id }: Omit<Attempt, 'relation'>): ScenarioSpec | null {
  const fitting = CAPTURE_FAULTS.filter((f) => f.kinds.includes(kind as DeclaredFault['kinds'][number]) && (options.fault === undefined || f.name === options.fault || f.code === options.fault));
  if (fitting.length === 0) return null;
  const fault = random.pick(fitting);
  const drawn = draw(random, kind, { ...options, inverted: false });
  const capture = drawn && fault.apply(drawn.capture, random);
  if (!drawn || !capture) return null;
  const wish: SideWish = { must: [], never: fault.never, standard: true };
  const whole = capture.signal.kind === 'nr' ? { ...drawn.air, ...nrAir(capture) } : drawn.air;
  const air = Object.fromEntries(Object.entries(whole).filter(([name]) => !fault.drops.includes(name)));
  const base = frame(random, drawn, { id, group: fault.code, about: `the recording: ${fault.name}` });
  return {
    ...base, capture, transmitter: null, sideA: drawSide(random, drawn.declared, wish), sideB: drawSide(random, drawn.declared, wish),
    expect: { hint: { code: fault.code, side: ['capture'] }, allowed: [], air },
  };
}

/** Nothing that a decode could measure, while both sides say what they were set to. */
function nothingThere(random: Random, options: ScenarioOptions, id: string): ScenarioSpec {
  const drawn = drawNotOfdm(random, options);
  const declared = drawNr(random, {})?.declared ?? {};
  const everyone: HintSide[] = ['a', 'b', 'capture', 'unknown', 'both'];
  return {
    ...frame(random, drawn, { id, group: 'no-ofdm', about: 'nothing may be claimed' }), transmitter: null,
    sideA: drawSide(random, declared, FREE), sideB: drawSide(random, declared, FREE),
    expect: { hint: null, allowed: [{ code: 'technology', side: everyone }, { code: 'receive-level', side: everyone }], air: drawn.air, claimsNothing: true, noneAllowed: true },
  };
}
