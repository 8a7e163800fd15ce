import type { StoredFile } from '#shared/api/files';
import type { Link } from '#shared/api/links';
import { ofKind, snapshotOf, type Draft } from './draft.js';

/** One thing that responders ask for in round two, and that is not there yet. */
export interface Lack { what: string; why: string }

const say = (lacking: boolean, what: string, why: string): Lack[] => (lacking ? [{ what, why }] : []);

/** What responders will ask for that neither a file nor the form says yet. None of it stops the filing. */
export function missingFrom(draft: Draft, files: readonly StoredFile[], link: Link | null): Lack[] {
  const { signalPath: path } = draft;
  const unsaid = [...new Set(files.flatMap((f) => f.snapshot?.missing ?? []))];
  return [
    ...say(ofKind(files, 'capture').length === 0, 'A capture', 'without one the comparison rests on what the files declare, and nothing is measured'),
    ...say(!snapshotOf(files, 'a'), `Side A’s running configuration${link ? ` (${link.a.party.shortName})` : ''}`, 'half of the comparison'),
    ...say(!snapshotOf(files, 'b'), `Side B’s running configuration${link ? ` (${link.b.party.shortName})` : ''}`, 'half of the comparison'),
    ...say(!draft.buildAId || !draft.buildBId, 'Exact builds of both units', 'a retest is made on named builds'),
    ...say(!draft.baseline.trim(), 'The last pair of builds that worked', 'a run that differs in one thing only finds the change soonest'),
    ...say(!draft.lastRung.downlink && !draft.lastRung.uplink, 'The last rung reached, and in which direction', 'it halves the search'),
    ...say(!draft.transmitter && ofKind(files, 'capture').length > 0, 'Whose signal the capture holds', 'where both files agree and the air does not, only this tells the side'),
    ...say(!path.path, 'The signal path', 'cabled and radiated fail in different ways'),
    ...say(path.path !== null && (path.attenuationDb === null || path.levelDbm === null), 'Attenuation and level', 'an overdriven receiver looks like a wrong setting'),
    ...say(!path.clockSource, 'The clock source', 'two free clocks look like a wrong carrier'),
    ...say(!path.lateCounters, 'Late and overflow counters', 'host timing breaks links that are set alike'),
    ...unsaid.map((what): Lack => ({ what: what.charAt(0).toUpperCase() + what.slice(1), why: 'no snapshot says it' })),
  ].filter((lack, k, all) => all.findIndex((other) => other.what.toLowerCase() === lack.what.toLowerCase()) === k);
}
