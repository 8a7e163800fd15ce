import type { LinkDetail } from '#shared/api/links';
import { LADDERS, type LinkInterface } from '#shared/vocabulary';

export interface IssueEvidence {
  readonly programme: string; readonly number: string; readonly title: string; readonly stage: string;
  readonly downlink: string | null; readonly uplink: string | null;
  readonly buildA: string | null; readonly buildB: string | null;
  readonly clean: boolean;
}
type Capability = LinkDetail['interworking'][number];

/**
 * The interworking table, one row a rung: it fails where an unsettled issue stopped short of it,
 * works with a waiver where only a waived one did, works where a retest or an issue passed it, and
 * else was not tried. Pure.
 */
export function ladderStanding(on: LinkInterface, issues: readonly IssueEvidence[]): Capability[] {
  const ladder = LADDERS[on];
  return ladder.map((name, rung) => {
    const stops = issues.filter((issue) => reached(ladder, issue) === rung - 1);
    const failing = stops.find(({ stage }) => !['settled', 'waived'].includes(stage));
    if (failing) return capability(name, 'fails', failing);
    const waived = stops.find(({ stage }) => stage === 'waived');
    if (waived) return capability(name, 'works with waiver', waived);
    const passed = issues.find((issue) => issue.clean || reached(ladder, issue) >= rung);
    return passed ? capability(name, 'works', passed) : { name, standing: 'not tried', buildA: null, buildB: null, issue: null };
  });
}

/** The direction that came further decides; an issue that names no rung says nothing (-2). */
function reached(ladder: readonly string[], issue: IssueEvidence): number {
  const rungs = [issue.downlink, issue.uplink].filter((rung): rung is string => rung !== null).map((rung) => ladder.indexOf(rung));
  return rungs.length > 0 ? Math.max(...rungs) : -2;
}

function capability(name: string, standing: Capability['standing'], issue: IssueEvidence): Capability {
  return { name, standing, buildA: issue.buildA, buildB: issue.buildB, issue: { programme: issue.programme, number: issue.number, title: issue.title } };
}
