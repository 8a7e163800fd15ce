/** Crosstie's words. Screens, API, code and database use these and no others. */

export const STAGES = ['raised', 'taken-up', 'cause-agreed', 'change-offered', 'under-retest', 'settled', 'waived', 'withdrawn'] as const;
export type Stage = (typeof STAGES)[number];

export const STAGE_LABELS: Record<Stage, string> = {
  raised: 'Raised',
  'taken-up': 'Taken up',
  'cause-agreed': 'Cause agreed',
  'change-offered': 'Change offered',
  'under-retest': 'Under retest',
  settled: 'Settled',
  waived: 'Waived',
  withdrawn: 'Withdrawn',
};

/** The six stops of the stage line; waived and withdrawn leave it. */
export const STAGE_LINE = ['raised', 'taken-up', 'cause-agreed', 'change-offered', 'under-retest', 'settled'] as const;

/** Perceived severities, ITU-T X.733 clause 8.1.2.3. */
export const SEVERITIES = ['critical', 'major', 'minor'] as const;
export type Severity = (typeof SEVERITIES)[number];

export const ROLES = ['integration-engineer', 'vendor-engineer', 'programme-manager', 'programme-administrator', 'observer'] as const;
export type Role = (typeof ROLES)[number];

/** Who a shared record reaches. `compare-only` exists for snapshots alone. */
export const REACHES = ['everyone', 'my-party', 'compare-only'] as const;
export type Reach = (typeof REACHES)[number];

export const SIDES = ['a', 'b'] as const;
export type Side = (typeof SIDES)[number];

export const INTERFACES = ['air', 'fronthaul', 'wifi'] as const;
export type LinkInterface = (typeof INTERFACES)[number];

/** The rungs of access in the trade's order, by interface. */
export const LADDERS: Record<LinkInterface, readonly string[]> = {
  air: ['synchronisation block', 'MIB', 'SIB1', 'PRACH', 'random-access response', 'Msg3', 'Msg4', 'connected', 'traffic'],
  wifi: ['beacon', 'authentication', 'association', 'traffic'],
  fronthaul: ['time sync', 'C-plane accepted', 'downlink U-plane', 'PRACH U-plane', 'uplink U-plane'],
};
export const DIRECTIONS = ['downlink', 'uplink'] as const;
export type Direction = (typeof DIRECTIONS)[number];

/** Parts that a party plays in a programme. */
export const PARTS = ['radio unit', 'distributed unit', 'access point', 'terminal', 'test lab'] as const;

/** Waiting clock: whose time runs. */
export const WAITING_CAUSES = ['side-a', 'side-b', 'lab', 'rig-away'] as const;
export type WaitingCause = (typeof WAITING_CAUSES)[number];

/** How a tie stands on the tie sheet. */
export const TIES = ['holds', 'broken', 'hangs', 'off-standard'] as const;
export type Tie = (typeof TIES)[number];

export const HINT_CODES = [
  'technology', 'subcarrier-spacing', 'cyclic-prefix', 'fft-size', 'sample-rate', 'carrier-frequency',
  'channel-bandwidth', 'ssb-placement', 'ssb-subcarrier-spacing', 'physical-cell-id', 'tdd-pattern',
  'spectrum-inversion', 'phase-compensation', 'half-subcarrier-shift', 'reference-clock', 'timing-offset',
  'capture-format', 'sample-gaps', 'receive-level', 'dc-offset', 'iq-imbalance', 'iq-compression',
  'iq-bit-width', 'frame-structure', 'fronthaul-cp-length', 'eaxc-mapping', 'prb-allocation',
  'timing-window', 'packet-loss', 'not-permitted', 'configuration',
] as const;
export type HintCode = (typeof HINT_CODES)[number];

export const HINT_SIDES = ['a', 'b', 'both', 'capture', 'unknown'] as const;
export type HintSide = (typeof HINT_SIDES)[number];

export const FILE_KINDS = ['capture', 'snapshot', 'glossary', 'attachment'] as const;
export type FileKind = (typeof FILE_KINDS)[number];

/** The stages that a decode reports while it runs, in order. */
export const DECODE_STEPS = ['waiting', 'reading', 'numerology', 'synchronisation', 'under A', 'under B', 'comparison', 'done'] as const;
export type DecodeStep = (typeof DECODE_STEPS)[number];
export const DECODE_STATES = ['queued', 'running', 'done', 'failed'] as const;
export type DecodeState = (typeof DECODE_STATES)[number];
