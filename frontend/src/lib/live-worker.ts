/// <reference lib="webworker" />
import { openStream, type Stream, type StreamMessage } from './live-stream.js';

/** One event stream for all tabs of the browser: over HTTP/1.1 a stream each would use up its six connections. */
const ports = new Set<MessagePort>();
let stream: Stream | null = null;

const tellAll = (message: StreamMessage): void => { for (const port of ports) port.postMessage(message); };

function hear(port: MessagePort, word: unknown): void {
  if (word === 'bye') ports.delete(port);
  if (word === 'hello') { ports.add(port); if (!stream?.alive()) stream = openStream(tellAll); }
  if (ports.size === 0) { stream?.close(); stream = null; }
}

globalThis.addEventListener('connect', (event) => {
  const port = (event as MessageEvent).ports[0]!;
  port.addEventListener('message', (e: MessageEvent<unknown>) => hear(port, e.data));
  port.start();
});
