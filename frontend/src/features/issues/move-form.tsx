import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { Link } from 'react-router-dom';
import type { PartyRef } from '#shared/api/common';
import type { Issue, PossibleMove } from '#shared/api/issues';
import { STAGE_LABELS, type Side, type Stage } from '#shared/vocabulary';
import { Cautions } from '../../components/ui/cautions.js';
import { Select, TextArea, TextField, type Option } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { reading } from '../../lib/query.js';
import { instant } from '../../lib/times.js';
import { useMoveIssue } from './api/move-issue.js';

/** Builds that the move may name, each under its side. */
function useBuildOptions(issue: Issue, sides: readonly Side[]): { builds: readonly Option[]; unread: unknown } {
  const { data, error } = useQuery({ ...reading('readLink', { params: { linkId: issue.link.id } }), enabled: sides.length > 0 });
  const builds = data ? sides.flatMap((side) => data.unitBuilds[side].map((b): Option => [b.id, `${issue[side].unit.name} ${b.label} (side ${side.toUpperCase()})`])) : [];
  return { builds, unread: error };
}

/** The retest on which the move rests: the newest, which the server has found to be of this outcome. */
function RestsOn({ issue }: { issue: Issue }) {
  const retest = issue.retests[0];
  if (!retest) return null;
  return <p className="small">It rests on the {retest.outcome} retest of {instant(retest.at)}: <span className="fig">{retest.buildA}</span> with <span className="fig">{retest.buildB}</span>{retest.decodeNumber !== null && `, decode ${retest.decodeNumber}`}.</p>;
}

/** With these nobody is waited for any more. */
const ENDS: readonly Stage[] = ['settled', 'withdrawn'];

/** What one move of the stage asks for. */
export function MoveForm({ issue, move, parties, close }: { issue: Issue; move: PossibleMove; parties: readonly PartyRef[]; close: () => void }) {
  const change = useMoveIssue({ programme: issue.programme.code, number: issue.number });
  const needs = (what: PossibleMove['requires'][number]): boolean => move.requires.includes(what);
  const { builds, unread } = useBuildOptions(issue, move.buildSides);
  const [given, setGiven] = useState({ reason: '', buildId: '', endsOn: '', partyId: '', ask: '', due: '' });
  const set = (name: keyof typeof given) => (e: { target: { value: string } }): void => setGiven((g) => ({ ...g, [name]: e.target.value }));

  const send = (e: FormEvent): void => {
    e.preventDefault();
    change.mutate({
      to: move.to, version: issue.version,
      ...(given.reason ? { reason: given.reason } : {}), ...(given.buildId ? { buildId: given.buildId } : {}),
      ...(given.endsOn ? { endsOn: given.endsOn } : {}),
      ...(given.partyId && given.ask ? { nextMove: { partyId: given.partyId, ask: given.ask, due: given.due || null } } : {}),
    }, { onSuccess: close });
  };
  return (
    <OpenedForm className="panel" onSubmit={send} aria-label={move.label}>
      <h3>{move.label}: {issue.programme.code}/{issue.number} goes to {STAGE_LABELS[move.to]}</h3>
      {(needs('clean-retest') || needs('failed-retest')) && <RestsOn issue={issue} />}
      <div className="fields">
        {needs('build') && <Select label="Build that carries the change" required none="choose a build" value={given.buildId} options={builds} onChange={set('buildId')} hint={<>Not in the list? Add it on <Link to={`/links/${issue.link.id}`}>the link’s page</Link> first.</>} />}
        {needs('end-date') && <TextField label="Ends on" type="date" required value={given.endsOn} onChange={set('endsOn')} hint="On that day the issue returns to Cause agreed." />}
      </div>
      <TextArea label={needs('reason') ? 'Reason' : 'Reason (may be left out)'} required={needs('reason')} maxLength={2000} value={given.reason} onChange={set('reason')} />
      {!ENDS.includes(move.to) && <fieldset className="fields">
        <legend className="legend">Who moves next</legend>
        <Select label="Party" none="leave as it is" value={given.partyId} options={parties.map((p) => [p.id, p.name] as const)} onChange={set('partyId')} />
        {given.partyId && <TextField label="Asked to" required value={given.ask} maxLength={500} onChange={set('ask')} />}
        {given.partyId && <TextField label="By" type="date" value={given.due} onChange={set('due')} />}
      </fieldset>}
      {move.to === 'under-retest' && <Cautions what="the retest" />}
      <Refused error={change.error ?? unread} />
      <div className="actions">
        <button type="submit" className="button button-main" disabled={change.isPending}>{move.label}</button>
        <button type="button" className="button" onClick={close}>Leave as it is</button>
      </div>
    </OpenedForm>
  );
}
