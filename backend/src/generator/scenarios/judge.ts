import type { AirValue, DecodeResult } from '#shared/decode';
import type { AirExpectation, ExpectedHint, Expectation } from './expectation.js';

/** What a decode got wrong against an expectation; empty: nothing. */
export interface Judgement {
  readonly hint: 'right' | 'wrong-code' | 'wrong-side' | 'missed' | 'false-alarm';
  readonly given: string;
  readonly due: string;
  readonly air: readonly { readonly name: string; readonly due: AirExpectation; readonly found: unknown }[];
}

/** Holds a decode's first hint and its air values against what was sent. */
export function judge(expect: Expectation, result: Pick<DecodeResult, 'hints' | 'air'>): Judgement {
  const [top] = result.hints;
  return {
    hint: judgeHint(expect, top),
    given: top ? `${top.code}/${top.side}` : 'none',
    due: expect.hint ? `${expect.hint.code}/${expect.hint.side.join('|')}` : 'none',
    air: Object.entries(expect.air).filter(([name, due]) => !meets(result.air[name], due)).map(([name, due]) => ({ name, due, found: result.air[name]?.value })),
  };
}

function judgeHint(expect: Expectation, top: DecodeResult['hints'][number] | undefined): Judgement['hint'] {
  const right = (e: ExpectedHint) => top?.code === e.code && e.side.includes(top.side);
  if (!top) return expect.hint === null || expect.noneAllowed ? 'right' : 'missed';
  if ((expect.hint && right(expect.hint)) || expect.allowed.some(right)) return 'right';
  if (expect.hint === null) return 'false-alarm';
  return top.code === expect.hint.code ? 'wrong-side' : 'wrong-code';
}

/** Whether an air value is what was sent, within the tolerance. */
export function meets(air: AirValue | undefined, due: AirExpectation): boolean {
  const found = air?.value;
  if ('isNull' in due) return found === null || found === undefined;
  if (found === null || found === undefined) return false;
  if ('oneOf' in due) return due.oneOf.includes(found as string);
  if ('mib' in due) return Object.entries(due.mib).every(([name, value]) => {
    const got = (found as Record<string, unknown>)[name];
    return Array.isArray(value) ? value.includes(got as number) : got === value;
  });
  const away = Number(found) - due.value;
  if (due.alt !== undefined && Math.abs(Number(found) - due.alt) <= due.tol) return true;
  // An offset whose grid could not be placed is right to a whole number of spacings.
  const isResidue = due.modulo !== undefined && air?.method?.startsWith('fractional') === true;
  return Math.abs(isResidue ? away - due.modulo! * Math.round(away / due.modulo!) : away) <= due.tol + 1e-9;
}
