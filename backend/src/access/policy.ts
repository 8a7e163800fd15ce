import type { Role } from '#shared/vocabulary';

/**
 * Who may do what to a thing that exists for them, in one table. What exists for whom is the
 * database's business (its row-level policies); a test holds the two against each other.
 */
const everyone = ['integration-engineer', 'vendor-engineer', 'programme-manager', 'programme-administrator', 'observer'] as const;
const engineers = ['integration-engineer', 'vendor-engineer'] as const;
const engineersAndManagers = ['integration-engineer', 'vendor-engineer', 'programme-manager'] as const;

const ACTIONS = {
  'read': everyone,
  'follow': everyone,
  'file-issue': engineers,
  'edit-issue': engineers,
  'change-severity': engineersAndManagers,
  'move-issue': engineersAndManagers,
  'set-next-move': engineersAndManagers,
  'write-entry': engineersAndManagers,
  'upload-file': engineersAndManagers,
  'decode': engineers,
  'judge-hint': engineers,
  'record-retest': ['integration-engineer'],
  'share-issue': ['integration-engineer', 'programme-manager'],
  'add-link': ['integration-engineer'],
  'add-unit': engineers,
  'add-build': engineers,
  'read-overview': ['programme-manager', 'programme-administrator', 'integration-engineer', 'vendor-engineer', 'observer'],
  'invite': ['programme-administrator'],
  'change-roles': ['programme-administrator'],
  'add-party': ['programme-administrator'],
  'read-audit': ['programme-administrator', 'programme-manager', 'integration-engineer', 'vendor-engineer'],
} as const satisfies Record<string, readonly Role[]>;

export type Action = keyof typeof ACTIONS;
export const ACTION_NAMES = Object.keys(ACTIONS) as readonly Action[];

export function may(role: Role, action: Action): boolean {
  return (ACTIONS[action] as readonly Role[]).includes(role);
}
