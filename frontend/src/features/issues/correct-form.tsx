import { useState, type FormEvent } from 'react';
import { useQuery } from '@tanstack/react-query';
import type { Issue } from '#shared/api/issues';
import { SEVERITIES, type Severity, type Side } from '#shared/vocabulary';
import { Select, TextArea, TextField, type Option } from '../../components/ui/field.js';
import { OpenedForm } from '../../components/ui/opened-form.js';
import { Refused } from '../../components/ui/refused.js';
import { RungFields } from '../../components/ui/rungs.js';
import { SignalPathFields } from '../../components/ui/signal-path-fields.js';
import { reading } from '../../lib/query.js';
import { Refusal } from '../../lib/refusal.js';
import { useChangeIssue } from './api/change-issue.js';

const buildOptions = (builds: readonly { id: string; label: string }[] = []): Option[] => builds.map((b): Option => [b.id, b.label]);

/** Corrects what the issue says. What stood there before stays in the history. */
export function CorrectForm({ issue, close }: { issue: Issue; close: () => void }) {
  const change = useChangeIssue({ programme: issue.programme.code, number: issue.number });
  const { data: link, error: unread } = useQuery(reading('readLink', { params: { linkId: issue.link.id } }));
  const [given, setGiven] = useState({
    title: issue.title, description: issue.description, severity: issue.severity, baseline: issue.baseline, lastRung: issue.lastRung, signalPath: issue.signalPath,
    buildAId: issue.a.build?.id ?? '', buildBId: issue.b.build?.id ?? '', transmitter: issue.transmitter ?? '',
  });
  const set = <K extends keyof typeof given>(name: K, value: (typeof given)[K]): void => setGiven((g) => ({ ...g, [name]: value }));
  const refused = change.error instanceof Refusal ? change.error : null;
  const send = (e: FormEvent): void => {
    e.preventDefault();
    const { buildAId, buildBId, transmitter, ...rest } = given;
    change.mutate({ version: issue.version, ...rest, buildAId: buildAId || null, buildBId: buildBId || null, transmitter: (transmitter || null) as Side | null }, { onSuccess: close });
  };
  return (
    <OpenedForm className="panel correct-form" onSubmit={send} aria-label="Correct the issue">
      <TextField label="What is wrong, in a sentence" required minLength={4} maxLength={200} value={given.title} error={refused?.field('title')} onChange={(e) => set('title', e.target.value)} />
      <div className="fields">
        <Select label="Severity" value={given.severity} options={SEVERITIES.map((s) => [s, s] as const)} onChange={(e) => set('severity', e.target.value as Severity)} />
        <Select label={`Build of ${issue.a.unit.name} (side A)`} none="not known" value={given.buildAId} options={buildOptions(link?.unitBuilds.a)} onChange={(e) => set('buildAId', e.target.value)} />
        <Select label={`Build of ${issue.b.unit.name} (side B)`} none="not known" value={given.buildBId} options={buildOptions(link?.unitBuilds.b)} onChange={(e) => set('buildBId', e.target.value)} />
        <Select label="Who transmits in the capture" none="not known" value={given.transmitter} options={[['a', 'side A'], ['b', 'side B']]} onChange={(e) => set('transmitter', e.target.value as Side)} />
        <RungFields link={issue.link.interface} value={given.lastRung} onChange={(v) => set('lastRung', v)} />
      </div>
      <SignalPathFields value={given.signalPath} onChange={(v) => set('signalPath', v)} />
      <TextField label="Last pair of builds that worked" maxLength={2000} value={given.baseline} onChange={(e) => set('baseline', e.target.value)} />
      <TextArea label="Description" hint="Markdown" rows={6} value={given.description} onChange={(e) => set('description', e.target.value)} />
      <Refused error={change.error ?? unread} />
      <div className="actions">
        <button type="submit" className="button button-main" disabled={change.isPending}>Keep the correction</button>
        <button type="button" className="button" onClick={close}>Leave as it is</button>
      </div>
    </OpenedForm>
  );
}
