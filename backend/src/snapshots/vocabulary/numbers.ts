import type { ParameterFacts, ParameterName, ParameterType } from '#shared/parameters';
import type { Interpreted } from './values.js';
import { scaleDecimal, TC_S, toSi, TS_S, unitOf, type Unit } from './units.js';

const NUMBER = '[-+]?(?:\\d[\\d_]*\\.?\\d*|\\.\\d+)(?:e[-+]?\\d+)?';
const WITH_UNIT = new RegExp(`^(${NUMBER})\\s*([a-zµμ_/]*)$`, 'i');
const HEXADECIMAL = /^0x([0-9a-f]+)$/i;
const FRACTION = /^(\d+)\s*[/:]\s*(\d+)$/;

/** ASN.1 and YANG enumerations that carry a number in their name, by parameter type. */
const ENUMERATIONS: Readonly<Partial<Record<ParameterType, readonly [RegExp, string][]>>> = {
  frequency: [[/^k?hz[-_]?(\d+(?:[p.]\d+)?)(?:-v\d+)?$/i, 'khz'], [/^scs[-_]?(\d+(?:p\d+)?)(?:khz)?$/i, 'khz']],
  time: [[/^ms(\d+(?:p\d+)?)(?:-v\d+)?$/i, 'ms'], [/^us(\d+)$/i, 'us']],
  tc: [[/^n(\d+)$/i, 'tc']],
  count: [[/^(?:n|mu|u|µ|sa|ssp|rb|prb)\s*=?\s*(\d+)$/i, '']],
};

const refuse = (reason: string): Interpreted => ({ ok: false, reason });
const read = (value: number, note?: string): Interpreted => ({ ok: true, value, note });

/** Reads a number with its unit, from the text itself, the key or a glossary, in that order. */
export function interpretNumber(parameter: ParameterName, facts: ParameterFacts, text: string, keyUnit: string | null): Interpreted {
  const hex = HEXADECIMAL.exec(text);
  if (hex !== null) return inCommonUnit(parameter, facts, String(Number.parseInt(hex[1], 16)), keyUnit);
  for (const [pattern, unit] of ENUMERATIONS[facts.type] ?? []) {
    const found = pattern.exec(text);
    if (found !== null) return inCommonUnit(parameter, facts, found[1].replace('p', '.'), unit === '' ? null : unit);
  }
  const fraction = FRACTION.exec(text);
  if (fraction !== null && facts.type === 'time') return { ok: true, value: `${fraction[1]}/${fraction[2]}`, note: 'a fraction of the useful symbol' };
  const found = WITH_UNIT.exec(text.replace(/^\+/, ''));
  if (found === null) return refuse(`"${text.slice(0, 60)}" is no number`);
  return inCommonUnit(parameter, facts, found[1], found[2] === '' ? keyUnit : found[2]);
}

function inCommonUnit(parameter: ParameterName, facts: ParameterFacts, digits: string, unitWord: string | null): Interpreted {
  if (unitWord === null) return withoutUnit(parameter, facts, digits);
  const unit = unitOf(unitWord);
  if (unit === null) return refuse(`the unit "${unitWord}" is not known`);
  return convert(facts, digits, unit) ?? refuse(`${facts.label} cannot be given in ${unitWord}`);
}

function convert(facts: ParameterFacts, digits: string, unit: Unit): Interpreted | null {
  const expects = { frequency: 'frequency', rate: 'frequency', time: 'time', delay: 'time', tc: 'time', ts: 'time', count: 'count' }[facts.type as string];
  if (facts.type === 'ts' && unit.dimension === 'samples') return read(scaleDecimal(digits, 0), 'in samples');
  if (unit.dimension !== expects) return null;
  if (facts.type === 'delay') return read(unit.factor === undefined ? scaleDecimal(digits, unit.exponent + 9) : toSi(digits, unit) * 1e9);
  if (facts.type === 'tc') return read(offsetNear(toSi(digits, unit) / TC_S));
  if (facts.type === 'ts') return read(near(toSi(digits, unit) / TS_S));
  if (facts.type === 'count') return whole(facts, scaleDecimal(digits, 0));
  return read(toSi(digits, unit));
}

/** Durations of a whole number of time units are written rounded ("13.02 us"). */
const near = (units: number): number => (Math.abs(units - Math.round(units)) < 0.02 ? Math.round(units) : units);

/** Timing-advance offsets (TS 38.133 table 7.1.2-2): 13.02 us means 25600 T_c, not 25598. */
const offsetNear = (units: number): number => [0, 13_792, 25_600, 39_936].find((o) => Math.abs(o - units) <= 0.001 * o) ?? near(units);

const whole = (facts: ParameterFacts, value: number): Interpreted =>
  Number.isInteger(value) ? read(value) : refuse(`${facts.label} must be a whole number, not ${value}`);

/**
 * A bare number is in the common unit. Where that unit makes it impossible (a carrier of 3489 Hz,
 * a guard interval of 0.8 s) and one customary unit makes it sensible, that one is assumed, and said.
 */
function withoutUnit(parameter: ParameterName, facts: ParameterFacts, digits: string): Interpreted {
  const plain = scaleDecimal(digits, 0);
  if (Number.isNaN(plain)) return refuse(`"${digits}" is no number`);
  if (facts.type === 'count') return whole(facts, plain);
  if (facts.type === 'frequency' && parameter.toLowerCase().includes('spacing') && Number.isInteger(plain) && plain >= 0 && plain <= 6) {
    return read(15e3 * 2 ** plain, `no spacing is ${plain} Hz; read as numerology ${plain}`);
  }
  const assumed = plain > 0 ? customaryUnit(parameter, facts.type, plain) : null;
  if (assumed === null) return read(plain);
  return read(scaleDecimal(digits, assumed[1]), `no unit stands there; read as ${assumed[0]}`);
}

function customaryUnit(parameter: ParameterName, type: ParameterType, plain: number): [unit: string, exponent: number] | null {
  const name = parameter.toLowerCase();
  if (type === 'frequency' && name.includes('spacing')) return plain < 1000 && plain >= 5 ? ['kHz', 3] : null;
  if (type === 'frequency') return plain < 100 && !name.includes('bandwidth') ? ['GHz', 9] : plain < 100_000 ? ['MHz', 6] : null;
  if (type === 'rate') return plain < 10_000 ? ['Msps', 6] : null;
  if (type !== 'time') return null;
  if (name.includes('guard')) return plain >= 20 ? ['ns', -9] : plain >= 0.05 ? ['us', -6] : null;
  return plain >= 0.5 ? ['ms', -3] : null;
}
