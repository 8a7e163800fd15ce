import { useQueryClient, type QueryClient } from '@tanstack/react-query';
import { useEffect } from 'react';
import type { EndpointName } from '#shared/api/endpoints';
import type { Decode } from '#shared/api/decodes';
import { liveEvent, type LiveEvent } from '#shared/api/overview';
import { listen } from '../lib/live.js';

const OF_ONE_ISSUE: readonly EndpointName[] = ['readIssue', 'listEntries', 'readHistory'];
const OF_LISTS: readonly EndpointName[] = ['listIssues', 'countIssues', 'readDaySheet', 'readOverview', 'listLinks', 'readLink'];
const POLL_MS = 10_000;

const refresh = (client: QueryClient, names: readonly EndpointName[]): void => {
  for (const name of names) void client.invalidateQueries({ queryKey: [name] });
};

/** Shows a running decode's step at once; the finished result is read under the reader's own reach. */
function noteProgress(client: QueryClient, { decodeId, step, progress }: LiveEvent): void {
  if (!decodeId) return;
  const key = ['readDecode', { decodeId }, null];
  const known = client.getQueryData<Decode>(key);
  if (known?.state === 'running' && step && progress !== undefined && progress < 1) {
    client.setQueryData(key, { ...known, step: step as Decode['step'], progress });
  } else void client.invalidateQueries({ queryKey: ['readDecode'] });
}

function apply(client: QueryClient, event: LiveEvent): void {
  if (event.topic === 'decode') {
    noteProgress(client, event);
    if (event.step === undefined || event.step === 'done') refresh(client, OF_ONE_ISSUE);
    refresh(client, ['readDaySheet']);
    return;
  }
  if (event.topic === 'issue') refresh(client, OF_ONE_ISSUE);
  refresh(client, OF_LISTS);
}

/** Keeps what is on the screen current: from the event stream, or by asking again while there is none. */
export function LiveUpdates() {
  const client = useQueryClient();
  useEffect(() => {
    let open = false;
    const stop = listen((message) => {
      if (message.kind === 'state') { open = message.open; return; }
      const read = liveEvent.safeParse(message.event);
      if (read.success) apply(client, read.data);
    });
    const poll = window.setInterval(() => { if (!open && !document.hidden) refresh(client, [...OF_ONE_ISSUE, ...OF_LISTS, 'readDecode']); }, POLL_MS);
    return () => { stop(); window.clearInterval(poll); };
  }, [client]);
  return null;
}
