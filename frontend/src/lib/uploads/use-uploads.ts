import { useCallback, useEffect, useReducer, useRef } from 'react';
import type { UploadFields } from '#shared/api/files';
import { messageOf } from '../refusal.js';
import { ENDPOINT_OF, guessedDatatype } from './kinds.js';
import { itemsOf, queue, type Labels, type UploadItem } from './queue.js';
import { sendFile, type RunningUpload } from './send-file.js';

export interface Uploads {
  items: readonly UploadItem[];
  add: (files: readonly File[], fieldsOf?: (item: UploadItem) => Partial<UploadFields>) => void;
  cancel: (key: string) => void;
  /** Sends the same bytes again, with other fields or as another kind where given. */
  resend: (key: string, change?: Partial<Pick<UploadItem, 'kind' | 'fields' | 'labels'>>) => void;
  remove: (key: string) => void;
}

/** The files that the reader dropped, on their way. `programme` travels with each. */
export function useUploads(programme: string, onlyKind?: UploadItem['kind']): Uploads {
  const [items, change] = useReducer(queue, []);
  const running = useRef(new Map<string, RunningUpload>());
  const known = useRef(items);
  useEffect(() => { known.current = items; }, [items]);
  useEffect(() => { const all = running.current; return () => { for (const one of all.values()) one.cancel(); }; }, []);

  const start = useCallback(async (item: UploadItem): Promise<void> => {
    const { key } = item;
    change({ do: 'change', key, to: { ...item, state: 'sending', sentBytes: 0, error: null, stored: null } });
    try {
      let before = 0;
      let dataFileId: string | undefined;
      for (const file of item.files) {
        const sentBefore = before;
        const run = sendFile({
          endpoint: ENDPOINT_OF[item.kind], file,
          fields: { programme, ...item.fields, ...item.labels, ...(dataFileId ? { dataFileId } : {}) },
          onProgress: (sent) => change({ do: 'change', key, to: { sentBytes: sentBefore + Math.min(sent, file.size), state: sent >= file.size && file === item.files.at(-1) ? 'reading' : 'sending' } }),
        });
        running.current.set(key, run);
        const stored = await run.done;
        before += file.size;
        dataFileId = stored.id;
        if (file === item.files.at(-1)) change({ do: 'change', key, to: { state: 'done', stored, sentBytes: item.totalBytes } });
      }
    } catch (error) {
      const cancelled = error instanceof DOMException && error.name === 'AbortError';
      change({ do: 'change', key, to: cancelled ? { state: 'cancelled' } : { state: 'failed', error: messageOf(error) } });
    } finally { running.current.delete(key); }
  }, [programme]);

  const add = useCallback<Uploads['add']>((files, fieldsOf) => {
    const { fresh, joined } = itemsOf(files, known.current);
    const ready = fresh.map((item): UploadItem => {
      const kind = onlyKind ?? item.kind;
      const state = onlyKind === 'attachment' ? 'sending' : item.state;
      return { ...item, kind, state, fields: fieldsOf?.({ ...item, kind }) ?? {}, labels: guessedDatatype(item.name) ? { datatype: guessedDatatype(item.name) } : {} };
    });
    change({ do: 'add', items: ready });
    for (const item of ready) if (item.state === 'sending') void start(item);
    for (const { key, files: both } of joined) {
      const item = known.current.find((i) => i.key === key);
      if (item) void start({ ...item, files: both, totalBytes: both.reduce((sum, f) => sum + f.size, 0) });
    }
  }, [onlyKind, start]);

  const resend = useCallback<Uploads['resend']>((key, to = {}) => {
    const item = known.current.find((i) => i.key === key);
    if (item) void start({ ...item, ...to });
  }, [start]);

  return {
    items, add, resend,
    cancel: useCallback((key) => running.current.get(key)?.cancel(), []),
    remove: useCallback((key) => { running.current.get(key)?.cancel(); change({ do: 'remove', key }); }, []),
  };
}

export type { Labels };
