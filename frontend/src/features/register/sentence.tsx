import type { Link } from '#shared/api/links';
import type { PartyRef } from '#shared/api/common';
import { HINT_CODES, SEVERITIES, STAGES, STAGE_LABELS, type HintCode, type Severity, type Stage } from '#shared/vocabulary';
import { hintWords } from '../../lib/hint-words.js';
import type { RegisterState } from './api/list-issues.js';
import { Many, One } from './phrase.js';
import type { Sort } from './columns.js';

type Change = (change: Partial<RegisterState>) => void;

const STANDINGS = [['unsettled', 'unsettled'], ['any', 'all'], ['ended', 'ended']] as const;
const MOVES = [['anyone', 'anyone'], ['mine', 'my party'], ['none', 'nobody']] as const;
const ORDERS: readonly (readonly [Sort, string])[] = [
  ['due', 'due date'], ['waiting', 'waiting time'], ['severity', 'severity'], ['stage', 'stage'], ['raised', 'date raised'], ['updated', 'last change'], ['number', 'number'],
];
const stageOptions = STAGES.map((s) => [s, STAGE_LABELS[s]] as const);
const severityOptions = SEVERITIES.map((s) => [s, s] as const);
const codeOptions = HINT_CODES.map((c) => [c, hintWords(c)] as const);

/** The filter as a sentence: each underlined phrase opens its choices. */
export function Sentence({ state, change, links, parties }: { state: RegisterState; change: Change; links: readonly Link[]; parties: readonly PartyRef[] }) {
  const moves = [...MOVES, ...parties.map((p) => [p.id, p.name] as const)];
  return (
    <div className="sentence">
      showing <One label="Which issues" value={state.standing ?? 'unsettled'} options={STANDINGS} choose={(standing) => change({ standing: standing as RegisterState['standing'] })} /> issues
      {' '}of <One label="Link" value={state.link ?? ''} options={[['', 'every link'], ...links.map((l) => [l.id, l.name] as const)]} choose={(link) => change({ link: link || undefined })} />,
      {' '}between <One label="Party" value={state.party ?? ''} options={[['', 'any parties'], ...parties.map((p) => [p.id, `${p.shortName} and others`] as const)]} choose={(party) => change({ party: party || undefined })} />,
      {' '}of <Many label="Severity" none="any severity" values={(state.severities as Severity[] | undefined) ?? []} options={severityOptions} choose={(severities) => change({ severities })} />,
      {' '}in <Many label="Stage" none="any stage" values={(state.stages as Stage[] | undefined) ?? []} options={stageOptions} choose={(stages) => change({ stages })} />,
      {' '}with <Many label="Likely mismatch" none="any mismatch" values={(state.codes as HintCode[] | undefined) ?? []} options={codeOptions} choose={(codes) => change({ codes })} />,
      {' '}where <One label="Next move" value={state.move ?? 'anyone'} options={moves} choose={(move) => change({ move: move as RegisterState['move'] })} /> has the next move
      {' '}<One label="When" value={state.late ? 'late' : ''} options={[['', 'at any time'], ['late', 'and is late']]} choose={(late) => change({ late: late ? 'true' : undefined })} />,
      {state.text ? <> that hold <One label="Words" value="kept" options={[['kept', `“${state.text}”`], ['', 'any words']]} choose={(kept) => { if (!kept) change({ text: undefined }); }} />,</> : null}
      {' '}by <One label="Order" value={state.sort ?? 'due'} options={ORDERS} choose={(sort) => change({ sort: sort as Sort, order: 'asc' })} />
    </div>
  );
}
