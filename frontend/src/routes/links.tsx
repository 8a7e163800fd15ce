import { useQuery, useSuspenseQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useMe, usePartyIds } from '../app/me.js';
import { Section } from '../components/ui/section.js';
import { useTitle } from '../components/ui/title.js';
import { AddLinkForm } from '../features/links/add-link-form.js';
import { AddUnitForm } from '../features/links/add-unit-form.js';
import { LinkTable } from '../features/links/link-table.js';
import { UnitList } from '../features/links/unit-list.js';
import { listLinks } from '../features/links/api/list-links.js';
import { listUnits } from '../features/links/api/list-units.js';
import { readProgramme } from '../features/programmes/api/read-programme.js';

/** Links, and the units that they join. */
export function LinksPage() {
  const { programme } = useMe();
  const code = programme?.code ?? '';
  const { data: links } = useSuspenseQuery(listLinks(code || undefined));
  const { data: units } = useSuspenseQuery(listUnits(code || undefined));
  const { data: people } = useQuery({ ...readProgramme(code), enabled: code !== '' });
  const [adding, add] = useState<'link' | 'unit' | null>(null);
  const ownPartyIds = usePartyIds(code);
  useTitle('Links');
  return (
    <main id="main" className="page" tabIndex={-1}>
      <div className="page-head"><h1>Links</h1></div>
      <Section title="Every link" aside={`${links.items.length} in ${programme?.name ?? 'the programme'}`}
        end={links.actions.add && adding !== 'link' && <button type="button" className="text-button" onClick={() => add('link')}>Add a link</button>}>
        {adding === 'link' && <AddLinkForm programme={code} units={units.items} close={() => add(null)} />}
        {links.items.length === 0 ? <p className="sheet empty">No link yet. A link joins two units; add the units first.</p> : <LinkTable links={links.items} />}
      </Section>
      <Section title="Units and builds" end={links.actions.addUnit && adding !== 'unit' && <button type="button" className="text-button" onClick={() => add('unit')}>Add a unit</button>}>
        {adding === 'unit' && <AddUnitForm programme={code} parties={(people?.parties ?? []).filter((p) => links.actions.add || ownPartyIds.has(p.id))} close={() => add(null)} />}
        {units.items.length > 0 && <UnitList units={units.items} />}
      </Section>
    </main>
  );
}
