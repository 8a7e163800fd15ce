import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import type { Issue } from '#shared/api/issues';
import { Cautions } from '../../components/ui/cautions.js';
import { Select, TextArea, type Option } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Radios } from '../../components/ui/radios.js';
import { Refused } from '../../components/ui/refused.js';
import { RungFields } from '../../components/ui/rungs.js';
import { reading } from '../../lib/query.js';
import { Refusal } from '../../lib/refusal.js';
import { useRecordRetest } from './api/record-retest.js';

const buildOptions = (builds: readonly { id: string; label: string }[]): Option[] => builds.map((b): Option => [b.id, b.label]);

/** Records what a retest on two named builds gave; a clean one names the decode that shows it. */
export function RetestForm({ issue, close }: { issue: Issue; close: () => void }) {
  const change = useRecordRetest({ programme: issue.programme.code, number: issue.number });
  const { data: link, error: unread } = useQuery(reading('readLink', { params: { linkId: issue.link.id } }));
  const [outcome, setOutcome] = useState<'clean' | 'failed'>('failed');
  const [buildAId, setA] = useState(issue.a.build?.id ?? '');
  const [buildBId, setB] = useState(issue.b.build?.id ?? '');
  const [decodeId, setDecode] = useState('');
  const [note, setNote] = useState('');
  const [lastRung, setRung] = useState(issue.lastRung);
  const decodes = issue.decodes.filter((d) => d.state === 'done').map((d): Option => [d.id, `Decode ${d.number}, ${d.captureName ?? 'snapshots alone'}`]);
  const send = (e: FormEvent): void => {
    e.preventDefault();
    change.mutate({ version: issue.version, outcome, buildAId, buildBId, decodeId: decodeId || null, note, lastRung }, { onSuccess: close });
  };
  return (
    <OpenedForm className="panel mb-4" onSubmit={send} aria-label="Record a retest">
      <Radios legend="Outcome" value={outcome} options={[['failed', 'failed'], ['clean', 'clean']]} onChange={setOutcome} />
      <div className="fields">
        <Select label={`Build of ${issue.a.unit.name} (side A)`} required none="choose a build" value={buildAId} options={buildOptions(link?.unitBuilds.a ?? [])} onChange={(e) => setA(e.target.value)} />
        <Select label={`Build of ${issue.b.unit.name} (side B)`} required none="choose a build" value={buildBId} options={buildOptions(link?.unitBuilds.b ?? [])} onChange={(e) => setB(e.target.value)} />
        <Select label="Decode of the retest’s capture" none="none" value={decodeId} options={decodes} onChange={(e) => setDecode(e.target.value)} hint="A clean retest needs the decode of a capture taken since the retest began, without a mismatch."
          error={change.error instanceof Refusal ? change.error.field('decodeId') : undefined} />
        <RungFields link={issue.link.interface} value={lastRung} onChange={setRung} />
      </div>
      <TextArea label="Note" maxLength={2000} value={note} onChange={(e) => setNote(e.target.value)} />
      <Cautions what="the retest" />
      <Refused error={change.error ?? unread} />
      <div className="actions">
        <button type="submit" className="button button-main" disabled={change.isPending}>Record the retest</button>
        <button type="button" className="button" onClick={close}>Not now</button>
      </div>
    </OpenedForm>
  );
}
