import { uplinkName, type ParameterName } from '#shared/parameters';
import type { FoundValue } from '../types.js';
import type { Gathered, Visit } from './gather.js';
import { pathText } from './names.js';
import { isBandwidthPart, isUplinkFrequencyInfo } from './rrc.js';
import { isElsewhere, isUplink } from './scope.js';

/**
 * What a file says by leaving a field out or by its structure: no cyclicPrefix in a bandwidth part
 * means the normal one, no frequencyShift7p5khz means no shift (TS 38.331), a TDD pattern means
 * TDD, and the structure's standard names the technology.
 */
export function implied(gathered: Gathered, stated: readonly FoundValue[]): FoundValue[] {
  const has = (parameter: ParameterName): boolean => stated.some((v) => v.parameter === parameter);
  const found: FoundValue[] = [];
  const add = (parameter: ParameterName, value: string | boolean, visit: Visit, note: string): void => {
    if (has(parameter) || found.some((v) => v.parameter === parameter)) return;
    found.push({ parameter, value, path: pathText(visit.steps), raw: null, line: visit.line, vocabulary: 'rrc', implied: true, note });
  };
  for (const visit of gathered.branches) {
    const last = visit.steps.at(-1);
    if (last === undefined || isElsewhere([...visit.steps, last])) continue;
    const direction = isUplink(visit.steps) ? uplinkName : (n: ParameterName): ParameterName => n;
    if (isBandwidthPart(last)) add(direction('cyclicPrefix'), 'normal', visit, 'an absent cyclicPrefix means normal');
    if (isUplinkFrequencyInfo(last)) add('halfSubcarrierShift', false, visit, 'an absent frequencyShift7p5khz means no shift');
    if (last.compact === 'tdduldlconfigurationcommon' || last.compact === 'tddconfig') add('duplexMode', 'tdd', visit, 'a TDD pattern is configured');
  }
  const technology = gathered.technologies[0];
  if (technology !== undefined) add('technology', technology.technology, technology.visit, `the fields are those of TS ${technology.technology === 'nr' ? '38' : '36'}.331`);
  return found;
}
