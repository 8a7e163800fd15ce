import { openStream, type StreamMessage } from './live-stream.js';

/** Listens to live events until the returned function is called. Tabs share one stream where the browser can. */
export function listen(hear: (message: StreamMessage) => void): () => void {
  if (typeof SharedWorker === 'undefined') return openStream(hear).close;
  const worker = new SharedWorker(new URL('./live-worker.ts', import.meta.url), { type: 'module', name: 'crosstie-live' });
  const { port } = worker;
  port.addEventListener('message', (e: MessageEvent<StreamMessage>) => hear(e.data));
  port.start();
  const hello = (): void => port.postMessage('hello');
  const bye = (): void => port.postMessage('bye');
  hello();
  window.addEventListener('pageshow', hello);
  window.addEventListener('pagehide', bye);
  return () => { window.removeEventListener('pageshow', hello); window.removeEventListener('pagehide', bye); bye(); };
}
