import { LADDERS, type LinkInterface } from '#shared/vocabulary';
import { invalid } from '../http/problems.js';

/** The last rung reached is one of the link's own ladder, or not stated. */
export function refuseUnknownRungs(rungs: Readonly<Record<'downlink' | 'uplink', string | null | undefined>>, on: LinkInterface): void {
  for (const direction of ['downlink', 'uplink'] as const) {
    const rung = rungs[direction];
    if (rung && !LADDERS[on].includes(rung)) throw invalid(`lastRung.${direction}`, `"${rung}" is not a rung of this link; its ladder is ${LADDERS[on].join(', ')}`);
  }
}
