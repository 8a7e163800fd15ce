/**
 * The demo's accounts at the local identity provider. All people and organisations are invented.
 * `sub` never changes: a person is known by issuer and subject.
 */
export interface Account {
  sub: string;
  email: string;
  emailVerified: boolean;
  name: string;
  party: string;
  work: string;
}

/** One password for all of them: they exist on this machine's loopback only. */
export const DEMO_PASSWORD = 'skerry-harbour';

function account(sub: string, [email, name, party, work]: [string, string, string, string], emailVerified = true): Account {
  return { sub, email, emailVerified, name, party, work };
}

/** The people of the demo programme. */
export const DEMO_ACCOUNTS: readonly Account[] = [
  account('mara-oyelaran', ['mara.oyelaran@harrowmere.example', 'Mara Oyelaran', 'Harrowmere Integration Lab', 'integration engineer']),
  account('edda-quillfeather', ['edda.quillfeather@harrowmere.example', 'Edda Quillfeather', 'Harrowmere Integration Lab', 'programme manager']),
  account('tobin-aschero', ['tobin.aschero@harrowmere.example', 'Tobin Aschero', 'Harrowmere Integration Lab', 'programme administrator']),
  account('osk-brandreth', ['osk.brandreth@harrowmere.example', 'Osk Brandreth', 'Harrowmere Integration Lab', 'observer']),
  account('ines-torvald', ['ines.torvald@tarnbeck.example', 'Ines Torvald', 'Tarnbeck Radio', 'vendor engineer']),
  account('jory-haldane', ['jory.haldane@ostrel.example', 'Jory Haldane', 'Ostrel Networks', 'vendor engineer']),
  account('rao-lindqvist', ['rao.lindqvist@vimmery.example', 'Rao Lindqvist', 'Vimmery Devices', 'vendor engineer']),
  account('petra-wynnlow', ['petra.wynnlow@pellfold.example', 'Petra Wynnlow', 'Pellfold Wireless', 'vendor engineer']),
];

/** Known to the provider, in no programme: the second one's e-mail is not verified. */
export const OUTSIDE_ACCOUNTS: readonly Account[] = [
  account('sable-orrindale', ['sable.orrindale@outside.example', 'Sable Orrindale', 'no party', 'in no programme']),
  account('wen-callowhay', ['wen.callowhay@tarnbeck.example', 'Wen Callowhay', 'Tarnbeck Radio', 'in no programme, e-mail not verified'], false),
];

export const ACCOUNTS: readonly Account[] = [...DEMO_ACCOUNTS, ...OUTSIDE_ACCOUNTS];

export function accountBySub(sub: string): Account | undefined {
  return ACCOUNTS.find((one) => one.sub === sub);
}

export function accountByEmail(email: string): Account | undefined {
  const wanted = email.trim().toLowerCase();
  return ACCOUNTS.find((one) => one.email === wanted);
}
