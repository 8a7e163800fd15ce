import type { REQUIREMENTS } from '#shared/api/issues';
import type { Role, Stage } from '#shared/vocabulary';

/** Where a person stands on an issue's link. */
export type StandingOnLink = 'side' | 'lab' | 'other';

export interface StageMove {
  readonly from: readonly Stage[];
  readonly to: Stage;
  readonly label: string;
  readonly roles: readonly Role[];
  readonly standings: readonly StandingOnLink[];
  readonly requires: readonly (typeof REQUIREMENTS)[number][];
}

const engineers: readonly Role[] = ['integration-engineer', 'vendor-engineer'];
const engineersAndManagers: readonly Role[] = [...engineers, 'programme-manager'];
const OPEN: readonly Stage[] = ['raised', 'taken-up', 'cause-agreed', 'change-offered', 'under-retest'];

/** The allowed moves of the stage: who may, from where, with what required. Nothing else moves it. */
export const STAGE_MOVES: readonly StageMove[] = [
  { from: ['raised'], to: 'taken-up', label: 'Take up', roles: engineersAndManagers, standings: ['side', 'lab'], requires: [] },
  { from: ['taken-up'], to: 'cause-agreed', label: 'Agree the cause', roles: engineers, standings: ['side', 'lab'], requires: ['reason'] },
  { from: ['cause-agreed'], to: 'change-offered', label: 'Offer a change', roles: engineers, standings: ['side', 'lab'], requires: ['build'] },
  { from: ['change-offered'], to: 'under-retest', label: 'Start the retest', roles: ['integration-engineer'], standings: ['lab'], requires: [] },
  { from: ['under-retest'], to: 'settled', label: 'Settle', roles: ['integration-engineer', 'programme-manager'], standings: ['lab'], requires: ['clean-retest'] },
  { from: ['under-retest'], to: 'change-offered', label: 'Back to change offered', roles: ['integration-engineer'], standings: ['lab'], requires: ['failed-retest'] },
  { from: ['under-retest'], to: 'cause-agreed', label: 'Back to cause agreed', roles: ['integration-engineer'], standings: ['lab'], requires: ['failed-retest'] },
  { from: OPEN, to: 'waived', label: 'Ask for a waiver', roles: engineersAndManagers, standings: ['side', 'lab'], requires: ['reason', 'end-date'] },
  { from: OPEN, to: 'withdrawn', label: 'Withdraw', roles: ['integration-engineer', 'programme-manager'], standings: ['side', 'lab'], requires: ['reason'] },
];

/** The moves that a role and a standing allow from a stage; what they require is checked by the move itself. */
export function movesFrom(stage: Stage, role: Role, standing: StandingOnLink): StageMove[] {
  return STAGE_MOVES.filter((move) => move.from.includes(stage) && move.roles.includes(role) && move.standings.includes(standing));
}
