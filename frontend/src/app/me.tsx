import { createContext, useContext, useMemo, useState, type ReactNode } from 'react';
import type { Me } from '#shared/api/people';
import type { ProgrammeRef } from '#shared/api/common';

interface Standing { me: Me; programmes: ProgrammeRef[]; programme: ProgrammeRef | null; choose: (code: string) => void }
const Context = createContext<Standing | null>(null);
const KEPT = 'crosstie.programme';

function keptProgramme(): string | null {
  try { return localStorage.getItem(KEPT); } catch { return null; }
}
function keepProgramme(code: string): void {
  try { localStorage.setItem(KEPT, code); } catch { /* private windows may keep nothing */ }
}

/** Who is signed in, and which of their programmes the pages show. */
export function MeProvider({ me, children }: { me: Me; children: ReactNode }) {
  const [chosen, setChosen] = useState(keptProgramme);
  const standing = useMemo<Standing>(() => {
    const programmes = [...new Map(me.memberships.map((m) => [m.programme.code, m.programme])).values()];
    const programme = programmes.find((p) => p.code === chosen) ?? programmes[0] ?? null;
    return { me, programmes, programme, choose: (code) => { keepProgramme(code); setChosen(code); } };
  }, [me, chosen]);
  return <Context value={standing}>{children}</Context>;
}

export function useMe(): Standing {
  const standing = useContext(Context);
  if (!standing) throw new Error('useMe is used outside the signed-in pages');
  return standing;
}

/** Whether the reader may file an issue in a programme; pages offer it to nobody else. */
export function useMayFile(programme: string | undefined): boolean {
  const { me } = useMe();
  return me.memberships.some((m) => m.programme.code === programme && m.actions.fileIssue);
}

/** The reader's parties in one programme. */
export function usePartyIds(programme: string): ReadonlySet<string> {
  const { me } = useMe();
  return useMemo(() => new Set(me.memberships.filter((m) => m.programme.code === programme).map((m) => m.party.id)), [me, programme]);
}
