import { inProgramme, signedIn } from '../access/rules.js';
import { endpoint, question, type Mounted } from '../http/endpoint.js';
import { changedSince, countsFor, foundIssues, lookedAt, runningDecodes, waitingForParty } from './day-sheet-queries.js';
import { ages, byPair, bySeverityAndStage, flowByWeek, waitingByCause, waitingByParty } from './overview-queries.js';

export const overviewEndpoints: Mounted[] = [
  endpoint('readDaySheet', signedIn, async ({ services }) => {
    const since = await lookedAt(services);
    return {
      waitingForParty: await waitingForParty(services),
      changed: await changedSince(services, since),
      running: await runningDecodes(services),
      lastLookedAt: since?.toISOString() ?? null,
      counts: await countsFor(services),
    };
  }),
  endpoint('markDaySheetRead', signedIn, async ({ services }) => {
    await services.database.change('update people set day_sheet_looked_at = now() where id = access.person()');
  }),
  endpoint('readOverview', inProgramme('read-overview'), async ({ services, granted }) => ({
    programme: granted.programmeCode,
    bySeverityAndStage: await bySeverityAndStage(services, granted.programmeId),
    byAge: await ages(services, granted.programmeId),
    byPair: await byPair(services, granted.programmeId),
    waitingByParty: await waitingByParty(services, granted.programmeId),
    waitingByCause: await waitingByCause(services, granted.programmeId),
    flow: await flowByWeek(services, granted.programmeId),
  })),
  question('find', async ({ services, caller, query }) => ({ items: await foundIssues(services, caller.personId, query.q) })),
];
