import { Section } from '../components/ui/section.js';
import { Radios } from '../components/ui/radios.js';
import { useTitle } from '../components/ui/title.js';
import { Preferences } from '../features/people/preferences.js';
import { Sessions } from '../features/people/sessions.js';
import { ROLE_LABELS } from '../lib/roles.js';
import { chooseTheme, useTheme } from '../app/theme.js';
import { useMe } from '../app/me.js';

/** What is the reader's own: messages, time zone, theme, sessions. */
export function AccountPage() {
  const { me } = useMe();
  const theme = useTheme();
  useTitle('Account');
  return (
    <main id="main" className="page account" tabIndex={-1}>
      <div className="page-head"><h1>{me.name}</h1><p className="soft">{me.email}</p></div>
      <Section title="Memberships">
        <ul className="plain-list sheet unit-list">
          {me.memberships.map((m) => <li key={m.id}><b>{m.programme.name}</b> <span className="small">{ROLE_LABELS[m.role]} for {m.party.name}</span></li>)}
        </ul>
      </Section>
      <Preferences me={me} />
      <Section title="Theme"><Radios legend={<span className="hidden-text">Theme</span>} value={theme} options={[['system', 'as the system'], ['light', 'light'], ['dark', 'dark']]} onChange={chooseTheme} /></Section>
      <Sessions />
    </main>
  );
}
