import type { StoredFile, VeiledFile } from '#shared/api/files';
import { Section } from '../../components/ui/section.js';
import { FileRow } from './file-row.js';
import type { ReactNode } from 'react';

/** Every file on the issue within the reader's reach; a veiled one is said to take part, and no more. */
export function FileList({ files, adding, end }: { files: readonly (StoredFile | VeiledFile)[]; adding: ReactNode; end: ReactNode }) {
  return (
    <Section title="Files" aside={files.length === 0 ? 'none' : undefined} end={end}>
      {adding}
      {files.length > 0 && (
        <ul className="plain-list sheet file-list">
          {files.map((f) => 'veiled' in f
            ? <li key={`veiled ${f.side} ${f.owner.id}`} className="file-row"><div><b>Snapshot of side {f.side.toUpperCase()}</b> <span className="small">{f.owner.name} · compare only: it takes part in the comparison and cannot be opened</span></div></li>
            : <FileRow key={f.id} file={f} />)}
        </ul>
      )}
    </Section>
  );
}
