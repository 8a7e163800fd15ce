import type { HintCode } from '#shared/vocabulary';
import type { Finding } from './types.js';

/**
 * What follows from what: a wrong numerology also changes the transform size and the resource
 * blocks, a wrong carrier moves the block. A finding whose cause is found too becomes one of its
 * consequences.
 */
const FOLLOWS_FROM: Readonly<Partial<Record<HintCode, readonly HintCode[]>>> = {
  'subcarrier-spacing': ['technology', 'sample-rate'],
  'cyclic-prefix': ['technology', 'subcarrier-spacing', 'fft-size', 'sample-rate'],
  'fft-size': ['technology', 'subcarrier-spacing', 'sample-rate'],
  'sample-rate': ['technology', 'subcarrier-spacing'],
  'channel-bandwidth': ['technology', 'subcarrier-spacing', 'sample-rate'],
  'carrier-frequency': ['technology', 'sample-rate', 'reference-clock', 'channel-bandwidth'],
  'ssb-placement': ['technology', 'carrier-frequency', 'reference-clock', 'sample-rate', 'ssb-subcarrier-spacing'],
  'ssb-subcarrier-spacing': ['technology', 'sample-rate'],
  'physical-cell-id': ['technology'],
  'tdd-pattern': ['technology', 'subcarrier-spacing'],
  'iq-imbalance': ['spectrum-inversion', 'capture-format'],
  'dc-offset': ['capture-format'],
  'receive-level': ['capture-format'],
  configuration: ['technology', 'carrier-frequency', 'subcarrier-spacing', 'tdd-pattern'],
};

/** Merges findings of one cause, drops doubles, and sorts: surest first, the rules' order among equals. */
export function settle(findings: readonly Finding[]): Finding[] {
  const single = withoutDoubles(findings);
  const roots = single.filter((finding) => !causeOf(finding, single));
  return roots.map((root) => ({ ...root, consequences: consequencesOf(root, single) }))
    .sort((x, y) => bucket(y.probability) - bucket(x.probability));
}

/** Probabilities within 0.05 of each other count as equal. */
function bucket(probability: number): number {
  return Math.round(probability * 20);
}

function withoutDoubles(findings: readonly Finding[]): Finding[] {
  return findings.filter((finding, i) => {
    const same = findings.findIndex((other) => other.code === finding.code && other.basis.parameter === finding.basis.parameter && other.side === finding.side);
    return same === i;
  });
}

function causeOf(finding: Finding, all: readonly Finding[]): Finding | undefined {
  const causes = FOLLOWS_FROM[finding.code] ?? [];
  return all.find((other) => other !== finding && other.probability > 0.5 && (spacingExplains(other, finding) || technologyExplains(other, finding))) ?? all.find((other) => other !== finding && other.probability > 0.5 && sidesMeet(other, finding)
    && (rateComesFirst(other, finding) && causes.includes(other.code) || listed(other, finding) || sameSetting(other, finding)));
}

/** A combination is off standard because the spacing that size and rate imply is. */
function spacingExplains(cause: Finding, finding: Finding): boolean {
  return finding.code === 'not-permitted' && ['fft-size', 'sample-rate', 'subcarrier-spacing'].includes(cause.code) && (finding.restsOn ?? []).some((name) => name.endsWith('ubcarrierSpacing'));
}

/** What is off standard was judged by the standard of a technology that its own side should not have declared. */
function technologyExplains(cause: Finding, finding: Finding): boolean {
  if (cause.code !== 'technology' || finding.code !== 'not-permitted') return false;
  return cause.side === finding.side || cause.basis.pattern === 'agree-contradicted' || cause.basis.pattern === 'neither';
}

/** A wrong label of the recording's rate explains a spacing; a declared rate is explained by a declared spacing. */
function rateComesFirst(cause: Finding, finding: Finding): boolean {
  if (cause.code === 'sample-rate' && finding.code === 'subcarrier-spacing') return cause.basis.pattern === 'capture';
  return !(cause.code === 'subcarrier-spacing' && finding.code === 'sample-rate' && finding.basis.pattern === 'capture');
}

/** What the standard forbids is the finding; that it also differs from the other side follows. */
function sameSetting(cause: Finding, finding: Finding): boolean {
  return cause.code === 'not-permitted' && cause.basis.parameter === finding.basis.parameter;
}

function listed(cause: Finding, finding: Finding): boolean {
  return finding.basis.parameter !== '' && cause.consequences.includes(finding.basis.parameter);
}

/** A consequence stands on the same side as its cause, or its side was left open. */
function sidesMeet(cause: Finding, finding: Finding): boolean {
  return cause.side === finding.side || finding.side === 'unknown' || cause.side === 'both' || cause.side === 'capture';
}

function consequencesOf(root: Finding, all: readonly Finding[]): string[] {
  const merged = all.filter((finding) => finding !== root && causeOf(finding, all) === root).map((finding) => finding.basis.parameter);
  return [...new Set([...root.consequences, ...merged])].filter((parameter) => parameter && parameter !== root.basis.parameter);
}
