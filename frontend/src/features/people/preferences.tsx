import type { Me } from '#shared/api/people';
import { Select } from '../../components/ui/field.js';
import { Check } from '../../components/ui/radios.js';
import { Refused } from '../../components/ui/refused.js';
import { Section } from '../../components/ui/section.js';
import { useChangeMe } from './api/change-me.js';

const NOTICES = [
  ['nextMove', 'the next move comes to my party'],
  ['entries', 'someone writes on an issue that I follow'],
  ['stages', 'an issue that I follow changes its stage'],
] as const;

const zones = (own: string): string[] => [...new Set([own, 'UTC', ...Intl.supportedValuesOf('timeZone')])];

/** When to write to the reader, and in which zone times are shown. Each change is kept at once. */
export function Preferences({ me }: { me: Me }) {
  const change = useChangeMe();
  return (
    <>
      <Section title="Messages" aside={`sent to ${me.email}`}>
        <div className="sheet preferences">
          <p>Write to me when</p>
          {NOTICES.map(([name, label]) => <Check key={name} checked={me.notify[name]} onChange={(on) => change.mutate({ notify: { ...me.notify, [name]: on } })}>{label}</Check>)}
        </div>
      </Section>
      <Section title="Time zone">
        <div className="preferences-field">
          <Select label="Times are shown in" value={me.timeZone} options={zones(me.timeZone).map((z) => [z, z.replaceAll('_', ' ')] as const)} onChange={(e) => change.mutate({ timeZone: e.target.value })} />
        </div>
      </Section>
      <Refused error={change.error} />
    </>
  );
}
