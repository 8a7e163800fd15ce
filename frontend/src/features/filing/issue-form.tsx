import type { Link } from '#shared/api/links';
import type { PartyRef } from '#shared/api/common';
import { SEVERITIES, type Severity, type Side } from '#shared/vocabulary';
import { Select, TextArea, TextField, type Option } from '../../components/ui/field.js';
import { Check, Radios } from '../../components/ui/radios.js';
import { RungFields } from '../../components/ui/rungs.js';
import { SignalPathFields } from '../../components/ui/signal-path-fields.js';
import type { Refusal } from '../../lib/refusal.js';
import type { Draft } from './draft.js';

interface FormProps {
  draft: Draft; set: (change: Partial<Draft>) => void; links: readonly Link[]; link: Link | null; filled: ReadonlySet<string>;
  builds: { a: readonly Option[]; b: readonly Option[] }; ownPartyIds: ReadonlySet<string>; parties: readonly PartyRef[]; refused: Refusal | null;
}

const fromFiles = (filled: ReadonlySet<string>, name: string): string | undefined => (filled.has(name) ? 'Read from the files; change it where they are wrong.' : undefined);

function LinkPart({ draft, set, links, link, filled, builds, refused }: FormProps) {
  return (
    <div className="fields">
      <Select label="Link" required none="choose a link" value={draft.linkId} hint={fromFiles(filled, 'linkId')} error={refused?.field('linkId')}
        options={links.map((l): Option => [l.id, `${l.name}: ${l.a.party.shortName} ${l.a.unit.name} – ${l.b.party.shortName} ${l.b.unit.name}`])} onChange={(e) => set({ linkId: e.target.value })} />
      <Select label={`Build of ${link?.a.unit.name ?? 'side A'}`} none="not known" value={draft.buildAId} hint={filled.has('buildAId') ? 'The link’s newest; change it if another ran.' : undefined} options={builds.a} onChange={(e) => set({ buildAId: e.target.value })} />
      <Select label={`Build of ${link?.b.unit.name ?? 'side B'}`} none="not known" value={draft.buildBId} hint={filled.has('buildBId') ? 'The link’s newest; change it if another ran.' : undefined} options={builds.b} onChange={(e) => set({ buildBId: e.target.value })} />
    </div>
  );
}

function SharePart({ draft, set, link, parties, ownPartyIds }: FormProps) {
  const sides = new Set(link ? [link.a.party.id, link.b.party.id] : []);
  const others = parties.filter((p) => !sides.has(p.id) && !ownPartyIds.has(p.id));
  const toggle = (id: string, on: boolean): void => set({ shareWith: on ? [...draft.shareWith, id] : draft.shareWith.filter((x) => x !== id) });
  return (
    <fieldset className="fieldset">
      <legend className="legend">Who sees the issue</legend>
      <p className="small">{link ? `${link.a.party.name} and ${link.b.party.name}, as the link’s two sides, and your own party.` : 'The link’s two sides and your own party.'}{others.length > 0 && ' Also:'}</p>
      <div className="choices">{others.map((p) => <Check key={p.id} checked={draft.shareWith.includes(p.id)} onChange={(on) => toggle(p.id, on)}>{p.name}</Check>)}</div>
    </fieldset>
  );
}

function MovePart({ draft, set, parties }: FormProps) {
  return (
    <fieldset className="fields">
      <legend className="legend">Who moves next</legend>
      <Select label="Party" none="the other end of the link, to take it up" value={draft.movePartyId} options={parties.map((p): Option => [p.id, p.name])} onChange={(e) => set({ movePartyId: e.target.value })} />
      {draft.movePartyId && <TextField label="Asked to" required maxLength={500} value={draft.moveAsk} onChange={(e) => set({ moveAsk: e.target.value })} />}
      {draft.movePartyId && <TextField label="By" type="date" value={draft.moveDue} onChange={(e) => set({ moveDue: e.target.value })} />}
    </fieldset>
  );
}

/** What no file says; whatever one says stands there already. */
export function IssueForm(props: FormProps) {
  const { draft, set, link, refused, filled } = props;
  return (
    <>
      <h2>What is wrong</h2>
      <TextField label="In a sentence" required minLength={4} maxLength={200} value={draft.title} error={refused?.field('title')} onChange={(e) => set({ title: e.target.value })} />
      <Radios legend="Severity" value={draft.severity} options={SEVERITIES.map((s) => [s as Severity | '', s] as const)} onChange={(severity) => set({ severity })} />
      <h2>Where</h2>
      <LinkPart {...props} />
      <div className="fields">
        <RungFields link={link?.interface ?? 'air'} value={draft.lastRung} onChange={(lastRung) => set({ lastRung })} />
        <Select label="Who transmits in the capture" none="not known" value={draft.transmitter} options={[['a', `side A${link ? `, ${link.a.party.shortName}` : ''}`], ['b', `side B${link ? `, ${link.b.party.shortName}` : ''}`]]} onChange={(e) => set({ transmitter: e.target.value as Side })} />
      </div>
      <h2>Under which conditions</h2>
      <SignalPathFields value={draft.signalPath} onChange={(signalPath) => set({ signalPath })} />
      {filled.has('clockSource') && <p className="small">The clock source was read from the files.</p>}
      <TextField label="Last pair of builds that worked" maxLength={2000} value={draft.baseline} onChange={(e) => set({ baseline: e.target.value })} />
      <TextArea label="Anything else (Markdown)" rows={5} value={draft.description} onChange={(e) => set({ description: e.target.value })} />
      <h2>Who</h2>
      <SharePart {...props} />
      <MovePart {...props} />
    </>
  );
}
