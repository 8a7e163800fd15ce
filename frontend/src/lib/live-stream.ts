import type { LiveEvent } from '#shared/api/overview';

export type StreamMessage = { kind: 'event'; event: LiveEvent } | { kind: 'state'; open: boolean };
export interface Stream { alive: () => boolean; close: () => void }

const NAMES = ['message', 'issue', 'decode', 'register'] as const;

/** Opens the server's event stream; the browser itself reconnects and sends Last-Event-ID. */
export function openStream(tell: (message: StreamMessage) => void): Stream {
  const source = new EventSource('/api/events');
  const pass = (e: MessageEvent<string>): void => {
    try { tell({ kind: 'event', event: JSON.parse(e.data) as LiveEvent }); } catch { /* a line that is not an event says nothing */ }
  };
  for (const name of NAMES) source.addEventListener(name, pass as EventListener);
  source.addEventListener('open', () => tell({ kind: 'state', open: true }));
  source.addEventListener('error', () => tell({ kind: 'state', open: false }));
  return { alive: () => source.readyState !== EventSource.CLOSED, close: () => source.close() };
}
