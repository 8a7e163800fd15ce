import { STAGE_LABELS, type Side, type Stage } from '#shared/vocabulary';
import { LINKS, PARTIES } from './parties.js';
import { plantDecode, type FileParts } from './recordings.js';
import type { Ask, PartyKey, PersonKey, Step, Story } from './story.js';

const ENDED: readonly Stage[] = ['settled', 'waived', 'withdrawn'];

/** One issue with its history, told step by step; what has no end yet stays open. */
export async function plantStory(parts: FileParts, story: Story): Promise<void> {
  const teller = new Teller(parts, story);
  await teller.file();
  for (const step of story.steps) await teller.tell(step);
  await teller.close();
}

class Teller {
  private issueId = '';
  private stage: Stage = 'raised';
  private stageSince: number;
  private move: { ask: Ask; since: number; by: PersonKey } | null = null;
  private decodes: string[] = [];
  private lastDay: number;

  constructor(private readonly parts: FileParts, private readonly story: Story) {
    this.stageSince = story.raised.day;
    this.lastDay = story.raised.day;
  }

  private get base() {
    return { programme_id: this.parts.tenants.programmeId, issue_id: this.issueId };
  }

  private get link() {
    return this.parts.tenants.links[this.story.link];
  }

  private build(side: Side, label: string | null): string | null {
    return label === null ? null : this.parts.tenants.builds.get(`${this.link[side]} ${label}`) ?? null;
  }

  async file(): Promise<void> {
    const { rows, tenants } = this.parts;
    const { story, link } = this;
    const by = tenants.people[story.raised.by];
    const parties = [...new Set([link.partyA, link.partyB, 'harrowmere' as PartyKey])].map((key) => tenants.parties[key]);
    const number = await rows.value<string>("select lpad(n::text, 4, '0') as value from generate_series(0, 9999) n where not exists (select 1 from issues where programme_id = $1 and number = lpad(n::text, 4, '0')) order by random() limit 1", [tenants.programmeId]);
    this.issueId = await rows.insert('issues', {
      programme_id: tenants.programmeId, number, link_id: link.id, party_ids: parties, title: story.title, description: story.description, severity: story.severity,
      build_a_id: this.build('a', story.builds[0]), build_b_id: this.build('b', story.builds[1]), transmitter: story.transmitter ?? null, rung_downlink: story.downlink, rung_uplink: story.uplink,
      signal_path: JSON.stringify({ path: story.path ?? null, attenuationDb: story.attenuationDb ?? null, levelDbm: story.levelDbm ?? null, clockSource: story.clock ?? null, lateCounters: null }),
      baseline: story.baseline ?? '', raised_by: by.id, raised_by_name: by.name, raised_by_party_id: tenants.parties[by.party], raised_at: rows.at(story.raised.day), updated_at: rows.at(story.raised.day),
      decode_state: story.decode ? 'running' : 'none',
    });
    await rows.run('delete from stage_intervals where issue_id = $1', [this.issueId]);
    await this.event(story.raised, 'filed', `filed the issue on ${LINKS[story.link].name}`);
    await this.follow(story.raised.by);
    await this.ask(story.raised, story.ask);
    if (story.decode) await this.decode({ ...story.raised, decode: story.decode });
  }

  async tell(step: Step): Promise<void> {
    this.lastDay = step.day;
    await this.follow(step.by);
    if ('say' in step) await this.say(step);
    else if ('stage' in step) await this.moveTo(step);
    else if ('decode' in step) await this.decode(step);
    else if ('retest' in step) await this.retest(step);
    else if ('waive' in step) await this.waive(step);
    else await this.ask(step, step.ask);
  }

  /** Writes the interval and the next move that are still running. */
  async close(): Promise<void> {
    const { rows } = this.parts;
    await this.stageInterval(null);
    if (ENDED.includes(this.stage)) await this.endMove(this.stageSince);
    else await this.endMove(null);
    await rows.run('update issues set stage = $2, version = $3, updated_at = $4, settled_at = $5 where id = $1', [this.issueId, this.stage, 1 + this.story.steps.length, rows.at(this.lastDay), this.stage === 'settled' ? rows.at(this.stageSince) : null]);
    // The stage's own trigger wrote an interval of today: the story's intervals stand instead.
    await rows.run("delete from stage_intervals where issue_id = $1 and since > now() - interval '5 minutes'", [this.issueId]);
    await rows.run('update stage_intervals set ended_at = null where issue_id = $1 and since = (select max(since) from stage_intervals where issue_id = $1)', [this.issueId]);
  }

  private async event(at: { day: number; by: PersonKey }, kind: string, text: string, reach: 'everyone' | 'my-party' = 'everyone'): Promise<void> {
    const person = this.parts.tenants.people[at.by];
    await this.parts.rows.insert('events', { ...this.base, at: this.parts.rows.at(at.day), person_id: person.id, person_name: person.name, party_id: this.parts.tenants.parties[person.party], party_name: PARTIES[person.party].shortName, kind, text, reach });
  }

  private async follow(by: PersonKey): Promise<void> {
    const person = this.parts.tenants.people[by];
    await this.parts.rows.run('insert into followers (issue_id, programme_id, person_id, party_id) values ($1, $2, $3, $4) on conflict do nothing', [this.issueId, this.parts.tenants.programmeId, person.id, this.parts.tenants.parties[person.party]]);
  }

  private async say(step: Extract<Step, { say: string }>): Promise<void> {
    const { tenants, rows } = this.parts;
    const person = tenants.people[step.by];
    const reach = step.onlyMyParty ? 'my-party' : 'everyone';
    await rows.insert('entries', { ...this.base, author_id: person.id, author_name: person.name, author_party_id: tenants.parties[person.party], author_party_name: PARTIES[person.party].name, body: step.say, reach, at: rows.at(step.day) });
    await this.event(step, 'entry', 'wrote in the thread', reach);
  }

  private async ask(at: { day: number; by: PersonKey }, ask: Ask): Promise<void> {
    await this.endMove(at.day);
    this.move = { ask, since: at.day, by: at.by };
    await this.event(at, 'next-move', `asked ${PARTIES[ask.party].name} to ${ask.what}`);
  }

  private async endMove(day: number | null): Promise<void> {
    if (!this.move) return;
    const { ask, since, by } = this.move;
    const { tenants, rows } = this.parts;
    const cause = ask.cause ?? (ask.party === this.link.partyA ? 'side-a' : ask.party === this.link.partyB ? 'side-b' : 'lab');
    await rows.insert('next_moves', { ...this.base, party_id: tenants.parties[ask.party], ask: ask.what, cause, since: rows.at(since), due: ask.dueInDays === undefined ? null : rows.date(ask.dueInDays), ended_at: day === null ? null : rows.at(day), set_by: tenants.people[by].id });
    this.move = null;
  }

  private async stageInterval(day: number | null): Promise<void> {
    const { rows } = this.parts;
    await rows.insert('stage_intervals', { ...this.base, stage: this.stage, since: rows.at(this.stageSince), ended_at: day === null ? null : rows.at(day) });
  }

  private async moveTo(step: Extract<Step, { stage: Stage }>): Promise<void> {
    await this.stageInterval(step.day);
    this.stage = step.stage;
    this.stageSince = step.day;
    const side: Side = this.parts.tenants.people[step.by].party === this.link.partyA && this.link.partyA !== this.link.partyB ? 'a' : 'b';
    const offered = step.build ? this.build(side, step.build) ?? this.build('a', step.build) : null;
    const text = `moved it to ${STAGE_LABELS[step.stage]}${step.build ? ` with build ${step.build}` : ''}${step.why ? `: ${step.why}` : ''}`;
    if (offered) await this.parts.rows.run(`update issues set build_a_id = case when exists (select 1 from builds b join links l on l.unit_a_id = b.unit_id where b.id = $2 and l.id = link_id) then $2 else build_a_id end, build_b_id = case when exists (select 1 from builds b join links l on l.unit_b_id = b.unit_id where b.id = $2 and l.id = link_id) then $2 else build_b_id end where id = $1`, [this.issueId, offered]);
    await this.event(step, 'stage', text);
    if (step.ask) await this.ask(step, step.ask);
  }

  private async decode(step: Extract<Step, { decode: unknown }>): Promise<void> {
    const { tenants } = this.parts;
    const at = { issueId: this.issueId, by: tenants.people[step.by], day: step.day, sides: { a: this.link.partyA, b: this.link.partyB }, number: this.decodes.length + 1 };
    this.decodes.push(await plantDecode(this.parts, at, step.decode));
    await this.event(step, 'decode', 'asked for a decode');
  }

  private async retest(step: Extract<Step, { retest: string }>): Promise<void> {
    const { tenants, rows } = this.parts;
    const [buildA, buildB] = [this.build('a', step.builds[0]), this.build('b', step.builds[1])];
    await rows.insert('retests', {
      ...this.base, decode_id: step.retest === 'clean' ? this.decodes.at(-1) : null, build_a_id: buildA, build_b_id: buildB, outcome: step.retest, note: step.note,
      rung_downlink: step.downlink ?? null, rung_uplink: step.uplink ?? null, recorded_by: tenants.people[step.by].id, recorded_by_name: tenants.people[step.by].name, at: rows.at(step.day),
    });
    await rows.run('update issues set rung_downlink = $2, rung_uplink = $3, build_a_id = $4, build_b_id = $5 where id = $1', [this.issueId, step.downlink ?? null, step.uplink ?? null, buildA, buildB]);
    await this.event(step, 'retest', `recorded a ${step.retest} retest: ${step.note}`);
  }

  private async waive(step: Extract<Step, { waive: string }>): Promise<void> {
    const { tenants, rows } = this.parts;
    const waiverId = await rows.insert('waivers', { ...this.base, reason: step.waive, ends_on: rows.date(step.endsInDays), asked_by: tenants.people[step.by].id, at: rows.at(step.day) });
    for (const [order, key] of step.signedBy.entries()) {
      const person = tenants.people[key];
      await rows.link('waiver_signatures', { waiver_id: waiverId, party_id: tenants.parties[person.party], programme_id: tenants.programmeId, person_id: person.id, person_name: person.name, at: rows.at(step.day + order / 4) });
    }
    await this.event(step, 'waiver', `asked for a waiver until ${rows.date(step.endsInDays)}: ${step.waive}`);
    await this.moveTo({ day: step.day + step.signedBy.length / 4, by: step.signedBy.at(-1) as PersonKey, stage: 'waived', why: 'both parties have signed' });
  }
}
