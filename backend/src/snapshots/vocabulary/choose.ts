import type { ParameterName } from '#shared/parameters';
import { spacingOfFrameStructure } from '../standards/frameStructure.js';
import type { FoundValue, ReadingProblem } from '../types.js';
import type { Candidate } from './gather.js';

export interface Chosen { readonly values: FoundValue[]; readonly problems: ReadingProblem[] }

/**
 * One value a parameter. Parents decide first (rank); a key that stands twice in one place counts
 * as it stood last; of several cells or carriers the first is taken, and that is said.
 */
export function choose(candidates: readonly Candidate[]): Chosen {
  const problems: ReadingProblem[] = [];
  const kept = ['', 'uplink'].reduce((rest, direction) => oneCarrier(rest, direction, problems), [...candidates]);
  const groups = new Map<ParameterName, Candidate[]>();
  for (const c of kept) groups.set(c.parameter, [...(groups.get(c.parameter) ?? []), c]);
  const values = [...groups].map(([parameter, group]) => (/eaxcids$/i.test(parameter) ? union(group) : pick(group, problems)));
  return { values, problems };
}

function pick(group: readonly Candidate[], problems: ReadingProblem[]): FoundValue {
  const rank = Math.min(...group.map((c) => c.rank));
  const best = group.filter((c) => c.rank === rank);
  const first = best[0];
  const chosen = best.filter((c) => c.path === first.path).at(-1) ?? first;
  const other = best.find((c) => c.path !== first.path && JSON.stringify(c.value) !== JSON.stringify(chosen.value));
  if (other !== undefined) {
    problems.push({ code: 'several-values', message: `Line ${other.line}: ${other.path} states ${String(other.value)}, line ${chosen.line} states ${String(chosen.value)}; the first is compared.`, line: other.line, path: other.path });
  }
  return chosen;
}

/** Identifiers stand one to an endpoint; a unit has them all. */
function union(group: readonly Candidate[]): FoundValue {
  const all = [...new Set(group.flatMap((c) => c.value as number[]))].sort((a, b) => a - b);
  return { ...group[0], value: all, raw: group.map((c) => c.raw).join(', ') };
}

/**
 * A carrier list has an entry a spacing. The entry of the bandwidth part's spacing (or of the
 * frame structure's) is this carrier's; without one, the first.
 */
function oneCarrier(candidates: Candidate[], direction: string, problems: ReadingProblem[]): Candidate[] {
  const named = (name: string): string => (direction === '' ? name : `${direction}${name[0].toUpperCase()}${name.slice(1)}`);
  const inList = candidates.filter((c) => c.parameter === named('resourceBlocks') && c.vocabulary !== 'plain' && c.vocabulary !== 'glossary');
  const best = Math.min(...inList.map((c) => c.rank));
  const containers = [...new Set(inList.filter((c) => c.rank === best).map((c) => c.container))];
  if (inList.length < 2) return candidates;
  const wanted = dataSpacing(candidates, named);
  const spacingIn = (container: string): unknown => candidates.find((c) => c.container === container && c.parameter === named('subcarrierSpacing'))?.value;
  const mine = containers.find((c) => spacingIn(c) === wanted) ?? containers[0];
  if (containers.length > 1 && wanted === null) {
    const line = inList[1].line;
    problems.push({ code: 'several-values', message: `Line ${line}: the file lists ${containers.length} carriers; the first is compared.`, line, path: inList[1].path });
  }
  const others = new Set(inList.map((c) => c.container).filter((c) => c !== mine));
  return candidates.filter((c) => !others.has(c.container));
}

function dataSpacing(candidates: readonly Candidate[], named: (name: string) => string): number | null {
  const part = candidates.find((c) => c.parameter === named('subcarrierSpacing') && c.rank <= 0);
  if (typeof part?.value === 'number') return part.value;
  const structure = candidates.find((c) => c.parameter === named('frameStructure'));
  return typeof structure?.value === 'number' ? spacingOfFrameStructure(structure.value) : null;
}
