import type { StoredFile, UploadFields } from '#shared/api/files';
import type { FileKind } from '#shared/vocabulary';
import { isRaw, kindOf, pairPartOf } from './kinds.js';

/**
 * `lacks-pair` and `lacks-labels` wait for the reader; `sending` has bytes under way; `reading` has
 * sent them all and waits for what the server read.
 */
export type UploadState = 'lacks-pair' | 'lacks-labels' | 'sending' | 'reading' | 'done' | 'failed' | 'cancelled';
export type Labels = Pick<UploadFields, 'datatype' | 'sampleRateHz' | 'centreFrequencyHz'>;

/** One thing that the reader dropped: a file, or the two files of a SigMF pair. */
export interface UploadItem {
  key: string;
  kind: FileKind;
  name: string;
  /** In the order in which they are sent. */
  files: readonly File[];
  labels: Labels;
  fields: Partial<UploadFields>;
  state: UploadState;
  sentBytes: number;
  totalBytes: number;
  stored: StoredFile | null;
  error: string | null;
}

export type QueueAction =
  | { do: 'add'; items: readonly UploadItem[] }
  | { do: 'change'; key: string; to: Partial<UploadItem> }
  | { do: 'remove'; key: string };

export function queue(items: readonly UploadItem[], action: QueueAction): readonly UploadItem[] {
  switch (action.do) {
    case 'add': return [...items, ...action.items];
    case 'change': return items.map((item) => (item.key === action.key ? { ...item, ...action.to } : item));
    case 'remove': return items.filter((item) => item.key !== action.key);
  }
}

/** A version 4 UUID; the browser's own generator of them exists on secure origins alone. */
export function newKey(): string {
  const bytes = crypto.getRandomValues(new Uint8Array(16));
  bytes[6] = (bytes[6]! & 0x0f) | 0x40;
  bytes[8] = (bytes[8]! & 0x3f) | 0x80;
  const hex = [...bytes].map((b) => b.toString(16).padStart(2, '0')).join('');
  return [hex.slice(0, 8), hex.slice(8, 12), hex.slice(12, 16), hex.slice(16, 20), hex.slice(20)].join('-');
}

const totalOf = (files: readonly File[]): number => files.reduce((sum, file) => sum + file.size, 0);

function itemOf(name: string, files: readonly File[], state: UploadState): UploadItem {
  return {
    key: newKey(), kind: kindOf(name), name, files, state,
    labels: {}, fields: {}, sentBytes: 0, totalBytes: totalOf(files), stored: null, error: null,
  };
}

const dataFirst = (files: readonly File[]): File[] =>
  files.toSorted((x, y) => x.name.slice(-4).localeCompare(y.name.slice(-4)));

/** Groups dropped files into items; a pair's half that came alone waits, and is joined when the other comes. */
export function itemsOf(dropped: readonly File[], waiting: readonly UploadItem[]): { fresh: UploadItem[]; joined: { key: string; files: File[] }[] } {
  const fresh: UploadItem[] = [];
  const joined: { key: string; files: File[] }[] = [];
  const halves = new Map<string, File[]>();
  for (const file of dropped) {
    const pair = pairPartOf(file.name);
    if (pair) halves.set(pair.stem, [...(halves.get(pair.stem) ?? []), file]);
    else fresh.push(itemOf(file.name, [file], isRaw(file.name) ? 'lacks-labels' : 'sending'));
  }
  for (const [stem, files] of halves) {
    const partner = waiting.find((item) => item.state === 'lacks-pair' && pairPartOf(item.files[0]!.name)?.stem === stem && item.files[0]!.name !== files[0]!.name);
    if (partner) joined.push({ key: partner.key, files: dataFirst([...partner.files, ...files]) });
    else fresh.unshift(itemOf(`${stem}.sigmf-meta`, dataFirst(files), files.length === 2 ? 'sending' : 'lacks-pair'));
  }
  return { fresh, joined };
}
