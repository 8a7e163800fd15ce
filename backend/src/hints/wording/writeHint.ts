import type { EvidenceItem, Hint } from '#shared/decode';
import type { Side } from '#shared/vocabulary';
import type { Basis, Finding, View } from '../types.js';
import { wouldDisprove } from './disprove.js';
import { hertz, named, shown } from './values.js';

/** Puts a finding in words for a reader who may see this much of either snapshot. */
export function writeHint(finding: Finding, view: View): Hint {
  const basis = visible(finding.basis, view);
  return {
    code: finding.code,
    side: finding.side,
    confidence: Math.round(finding.probability * 1000) / 1000,
    summary: summary(finding, basis),
    evidence: evidence(basis),
    wouldDisprove: wouldDisprove(finding.code),
    parameters: basis.parameter ? [basis.parameter] : [],
    consequences: [...finding.consequences],
    basis,
  };
}

/** What is left of the basis within the reader's view: values both sides declare may be compared. */
export function visible(basis: Basis, view: View): Basis {
  const both = basis.declaredBy.length === 2;
  const open = (side: Side): boolean => view[side] === 'full' || (view[side] === 'compare-only' && both);
  const declared = { ...(open('a') && { a: basis.declared.a }), ...(open('b') && { b: basis.declared.b }) };
  const sideFacts = { ...(view.a === 'full' && { a: basis.sideFacts.a }), ...(view.b === 'full' && { b: basis.sideFacts.b }) };
  return { ...basis, declared, sideFacts };
}

/** One plain sentence: side, setting, declared value, what the air shows, clause. */
function summary(finding: Finding, basis: Basis): string {
  const sentence = SENTENCES[basis.pattern](finding, basis);
  return basis.clause ? `${sentence} (${basis.clause}).` : `${sentence}.`;
}

const SENTENCES: Readonly<Record<Basis['pattern'], (finding: Finding, basis: Basis) => string>> = {
  'differ-decided': (finding, basis) => {
    const side = finding.side as Side;
    const other = side === 'a' ? 'b' : 'a';
    return `${sideName(side)} has ${setting(basis, side)}; the air shows ${air(basis)}, as ${sideWord(other)} declares`;
  },
  'differ-open': (_, basis) => `The two sides differ in ${named(basis.parameter)}: side A declares ${value(basis, 'a')}, side B ${value(basis, 'b')}; nothing here tells which is on the air`,
  neither: (_, basis) => `Neither side's ${named(basis.parameter)} is on the air: side A declares ${value(basis, 'a')}, side B ${value(basis, 'b')}, the air shows ${air(basis)}`,
  'agree-contradicted': (_, basis) => {
    const sender = basis.transmitter ? `the transmitter (${sideWord(basis.transmitter)}) does not send what its snapshot says` : 'the transmitter does not send what the snapshots say';
    return `Both sides declare ${named(basis.parameter)} ${value(basis, 'a')}, but the air shows ${air(basis)}: ${sender}`;
  },
  'one-contradicted': (finding, basis) => `${sideName(finding.side as Side)} has ${setting(basis, finding.side as Side)}, but the air shows ${air(basis)}`,
  'pattern-decided': (finding) => `${finding.side === 'both' ? 'Neither side\'s downlink-uplink pattern fits' : `${sideName(finding.side as Side)}'s downlink-uplink pattern does not fit`} the level in the capture`,
  'pattern-contradicted': () => 'The level in the capture does not fit the declared downlink-uplink pattern',
  'not-permitted': (finding, basis) => `${finding.side === 'both' ? 'Both sides have' : `${sideName(finding.side as Side)} has`} ${setting(basis, finding.side === 'b' ? 'b' : 'a')}, which the standard does not allow`,
  contradiction: (finding, basis) => `${sideName(finding.side as Side)}'s snapshot contradicts itself on ${named(basis.parameter)}`,
  capture: (_, basis) => basis.facts[0] ?? 'The recording itself is at fault',
};

function setting(basis: Basis, side: Side): string {
  const known = basis.declared[side];
  return known === undefined ? `a ${named(basis.parameter)} of its own` : `${named(basis.parameter)} ${shown(basis.parameter, known)}`;
}

function value(basis: Basis, side: Side): string {
  const known = basis.declared[side];
  return known === undefined ? 'a value of its own' : shown(basis.parameter, known);
}

/** What the air shows, and between what it cannot tell. */
function shownAir({ airParameter, air: seen, airPeriodHz }: Basis): string {
  const text = shown(airParameter, seen);
  return airPeriodHz ? `${text} or a whole number of ${hertz(airPeriodHz)} beside it` : text;
}

function air(basis: Basis): string {
  const text = shownAir(basis);
  return basis.airParameter === basis.parameter ? text : `${named(basis.airParameter)} ${text}`;
}

function sideWord(side: Side): string {
  return `side ${side.toUpperCase()}`;
}

function sideName(side: Side): string {
  return `Side ${side.toUpperCase()}`;
}

function evidence(basis: Basis): EvidenceItem[] {
  const clause = basis.clause ? { clause: basis.clause } : {};
  const items: EvidenceItem[] = [];
  for (const side of basis.declaredBy) {
    const known = basis.declared[side];
    items.push({ text: known === undefined ? `declared by side ${side.toUpperCase()}` : `Side ${side.toUpperCase()} declares ${named(basis.parameter)} ${shown(basis.parameter, known)}`, kind: 'declared', side });
  }
  if (basis.announced !== null) items.push({ text: `The unit announces ${named(basis.parameter)} ${shown(basis.parameter, basis.announced)}`, kind: 'announced', ...clause });
  if (basis.air !== null) items.push({ text: `The air shows ${named(basis.airParameter)} ${shownAir(basis)}${basis.method ? `: ${basis.method}` : ''}`, kind: 'measured', ...clause });
  for (const text of basis.facts.slice(basis.pattern === 'capture' ? 1 : 0)) items.push({ text, kind: 'measured' });
  if (basis.pattern === 'capture' && basis.facts.length > 0) items.unshift({ text: `${basis.facts[0]}`, kind: 'measured' });
  for (const side of ['a', 'b'] as const) for (const text of basis.sideFacts[side] ?? []) items.push({ text, kind: 'declared', side });
  return items;
}
