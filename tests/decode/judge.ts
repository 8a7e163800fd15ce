import type { DecodeResult } from '#shared/decode';

export interface Expected { code: string; side: string[] }
export interface CaseRecord {
  id: string;
  group: string;
  args: string[];
  expect: {
    hint: Expected | null;
    allowed: Expected[];
    air: Record<string, Record<string, unknown>>;
    claimsNothing?: boolean;
    noneAllowed?: boolean;
    error?: unknown;
  };
}

export interface Outcome {
  id: string;
  group: string;
  /** What is not as expected, one line each; empty where all is. */
  wrong: string[];
  hintRight: boolean;
  confidence: number | null;
  top: string;
}

/** Holds a result against a case record: the first hint with its side, and each stated air value. */
export function judge(record: CaseRecord, result: unknown, stderr = ''): Outcome {
  const found = result as DecodeResult | { error: unknown } | null;
  if (!found || 'error' in found) {
    return { id: record.id, group: record.group, wrong: [`no result: ${JSON.stringify(found)} ${stderr.slice(-300)}`], hintRight: false, confidence: null, top: 'none' };
  }
  const hint = judgeHint(record, found);
  const air = Object.entries(record.expect.air).flatMap(([name, expected]) => judgeAir(found, name, expected) ?? []);
  const first = found.hints[0];
  return {
    id: record.id, group: record.group, wrong: [...(hint ? [hint] : []), ...air], hintRight: hint === null,
    confidence: first?.confidence ?? null, top: found.hints.map((h) => `${h.code} ${h.side} ${h.confidence}`).join(', ') || 'none',
  };
}

function judgeHint({ expect }: CaseRecord, found: DecodeResult): string | null {
  const first = found.hints[0];
  const answers = [...(expect.hint ? [expect.hint] : []), ...expect.allowed];
  if (!first) return expect.hint === null || expect.noneAllowed ? null : `no hint, expected ${expect.hint.code} ${expect.hint.side.join('|')}`;
  if (answers.some((answer) => answer.code === first.code && answer.side.includes(first.side))) return null;
  const due = expect.hint ? `${expect.hint.code} ${expect.hint.side.join('|')}` : 'none';
  return `hint ${first.code} ${first.side} (${first.confidence}), expected ${due}: ${first.summary}`;
}

function judgeAir(found: DecodeResult, name: string, expected: Record<string, unknown>): string | null {
  const air = found.air[name];
  const value = air?.value ?? null;
  if (matches(value, expected, air?.method ?? '')) return null;
  return `air ${name} ${JSON.stringify(value)} (${air?.reason ?? air?.method ?? ''}), expected ${JSON.stringify(expected)}`;
}

function matches(value: unknown, expected: Record<string, unknown>, method: string): boolean {
  if (expected['isNull']) return value === null;
  if (Array.isArray(expected['oneOf'])) return expected['oneOf'].includes(value);
  if (expected['mib']) return mibMatches(value, expected['mib'] as Record<string, unknown>);
  if (typeof value !== 'number') return false;
  return near(value, expected, method);
}

function near(value: number, expected: Record<string, unknown>, method: string): boolean {
  const tol = Number(expected['tol'] ?? 0);
  const period = Number(expected['modulo'] ?? 0);
  return [expected['value'], expected['alt']].some((target) => {
    if (typeof target !== 'number') return false;
    const away = value - target;
    const folded = period > 0 && method.startsWith('fractional') ? away - period * Math.round(away / period) : away;
    return Math.abs(folded) <= tol;
  });
}

function mibMatches(value: unknown, expected: Record<string, unknown>): boolean {
  if (typeof value !== 'object' || value === null) return false;
  return Object.entries(expected).every(([key, due]) => {
    const got = (value as Record<string, unknown>)[key];
    return Array.isArray(due) ? due.includes(got) : got === due;
  });
}
