import type { DecodeResult } from '#shared/decode';
import type { Reach, Side } from '#shared/vocabulary';
import { redactResult } from '../hints/redact.js';
import type { View } from '../hints/types.js';

/** Who may see a decode's snapshot of one side in full. */
export interface SnapshotRights {
  readonly side: Side;
  readonly reach: Reach;
  readonly parties: readonly string[];
}

export interface Audience {
  /** Null: everyone on the issue who has no version of its own. */
  readonly partyId: string | null;
  readonly view: View;
}

/**
 * The versions of a result that are stored: one for everyone, and one for each party that may see
 * more. A decode for one party only has that party's version alone. Pure.
 */
export function audiencesOf(decode: { reach: 'everyone' | 'my-party'; partyId: string }, snapshots: readonly SnapshotRights[]): Audience[] {
  if (decode.reach === 'my-party') return [{ partyId: decode.partyId, view: viewOf(decode.partyId, snapshots) }];
  const closed = snapshots.filter(({ reach }) => reach !== 'everyone');
  const parties = [...new Set(closed.flatMap(({ parties }) => parties))];
  return [{ partyId: null, view: viewOf(null, snapshots) }, ...parties.map((partyId) => ({ partyId, view: viewOf(partyId, snapshots) }))];
}

function viewOf(partyId: string | null, snapshots: readonly SnapshotRights[]): View {
  const of = (side: Side): View['a'] => {
    const snapshot = snapshots.find((each) => each.side === side);
    if (!snapshot || snapshot.reach === 'everyone') return 'full';
    if (partyId !== null && snapshot.parties.includes(partyId)) return 'full';
    return snapshot.reach === 'compare-only' ? 'compare-only' : 'none';
  };
  return { a: of('a'), b: of('b') };
}

/** A result in an audience's version. Each hint carries its rank in the whole, since a reader may not get all. */
export function resultFor(result: DecodeResult, view: View): DecodeResult {
  const ranked = result.hints.flatMap((hint, rank) => redactResult({ ...result, hints: [hint] }, view).hints.map((shown) => ({ ...shown, rank })));
  return { ...redactResult(result, view), hints: ranked };
}
