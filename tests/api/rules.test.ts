import { describe, expect, it } from 'vitest';
import fc from 'fast-check';
import { audiencesOf } from '#backend/decodes/audiences';
import { displayName } from '#backend/files/display-name';
import { guarded } from '#backend/issues/export-csv';
import { ladderStanding, type IssueEvidence } from '#backend/links/interworking';
import { movesFrom, STAGE_MOVES } from '#backend/moves/stage-table';
import { LADDERS, REACHES, ROLES, STAGES, type Stage } from '#shared/vocabulary';

describe('the stages\' moves', () => {
  const to = (stage: Stage, role: (typeof ROLES)[number], standing: 'side' | 'lab' | 'other') => movesFrom(stage, role, standing).map((move) => move.to).toSorted();

  it('are those of the stage line, one stop at a time, and the two ways off it', () => {
    expect(to('raised', 'vendor-engineer', 'side')).toEqual(['taken-up', 'waived']);
    expect(to('taken-up', 'vendor-engineer', 'side')).toEqual(['cause-agreed', 'waived']);
    expect(to('cause-agreed', 'vendor-engineer', 'side')).toEqual(['change-offered', 'waived']);
    expect(to('change-offered', 'integration-engineer', 'lab')).toEqual(['under-retest', 'waived', 'withdrawn']);
    expect(to('under-retest', 'integration-engineer', 'lab')).toEqual(['cause-agreed', 'change-offered', 'settled', 'waived', 'withdrawn']);
  });

  it('end nowhere else: nothing leaves an ended stage, and nobody who only watches moves anything', () => {
    for (const role of ROLES) for (const standing of ['side', 'lab', 'other'] as const) {
      for (const stage of ['settled', 'waived', 'withdrawn'] as const) expect(movesFrom(stage, role, standing)).toEqual([]);
      for (const stage of STAGES) {
        if (role === 'observer' || role === 'programme-administrator' || standing === 'other') expect(movesFrom(stage, role, standing)).toEqual([]);
      }
    }
  });

  it('ask for what they rest on: a build, a retest by its outcome, a reason, an end', () => {
    const requires = (wanted: Stage) => STAGE_MOVES.filter((move) => move.to === wanted).map((move) => move.requires);
    expect(requires('settled')).toEqual([['clean-retest']]);
    expect(requires('waived')).toEqual([['reason', 'end-date']]);
    expect(requires('withdrawn')).toEqual([['reason']]);
    expect(STAGE_MOVES.filter(({ from, to: stage }) => from.includes('under-retest') && ['cause-agreed', 'change-offered'].includes(stage)).every((move) => move.requires.includes('failed-retest'))).toBe(true);
    expect(STAGE_MOVES.find(({ from, to: stage }) => from.includes('cause-agreed') && stage === 'change-offered')?.requires).toEqual(['build']);
  });

  it('settle by the lab alone: no side passes its own change', () => {
    expect(STAGE_MOVES.filter((move) => move.to === 'settled' || move.to === 'under-retest').every(({ standings }) => standings.join() === 'lab')).toBe(true);
  });
});

describe('the interworking table', () => {
  const issue = (change: Partial<IssueEvidence>): IssueEvidence => ({ programme: 'SKH', number: '1111', title: 'x', stage: 'raised', downlink: null, uplink: null, buildA: '1', buildB: '2', clean: false, ...change });
  const standing = (issues: IssueEvidence[]) => Object.fromEntries(ladderStanding('air', issues).map(({ name, standing: of }) => [name, of]));

  it('says nothing of what nobody tried', () => {
    expect(new Set(Object.values(standing([])))).toEqual(new Set(['not tried']));
    expect(Object.keys(standing([]))).toEqual(LADDERS.air);
    expect(new Set(Object.values(standing([issue({})])))).toEqual(new Set(['not tried']));
  });

  it('works up to the last rung reached and fails at the next', () => {
    expect(standing([issue({ downlink: 'MIB' })])).toMatchObject({ 'synchronisation block': 'works', MIB: 'works', SIB1: 'fails', PRACH: 'not tried' });
    expect(standing([issue({ downlink: 'MIB', uplink: 'PRACH' })])).toMatchObject({ SIB1: 'works', PRACH: 'works', 'random-access response': 'fails' });
  });

  it('works with waiver where only a waived issue stops', () => {
    expect(standing([issue({ downlink: 'MIB', stage: 'waived' })]).SIB1).toBe('works with waiver');
    expect(standing([issue({ downlink: 'MIB', stage: 'waived' }), issue({ downlink: 'MIB', number: '2222' })]).SIB1).toBe('fails');
  });

  it('works everywhere after a clean retest, and a settled issue stops nothing', () => {
    expect(new Set(Object.values(standing([issue({ downlink: 'MIB', stage: 'settled', clean: true })])))).toEqual(new Set(['works']));
    expect(standing([issue({ downlink: 'MIB', stage: 'settled' })]).SIB1).toBe('not tried');
  });

  it('names the issue and the builds that say so', () => {
    const sib1 = ladderStanding('air', [issue({ downlink: 'MIB', number: '4187', buildA: '4.2.1', buildB: '22.3.0' })]).find(({ name }) => name === 'SIB1');
    expect(sib1).toMatchObject({ buildA: '4.2.1', buildB: '22.3.0', issue: { programme: 'SKH', number: '4187' } });
  });
});

describe('a cell of the export', () => {
  // OWASP, "CSV Injection": a cell that begins with one of these is taken for a formula.
  it.each(['=1+1', '+1', '-1', '@SUM(A1)', '\t=1', '\r=1', '\n=1', ' =1', '＝1'])('that a spreadsheet would run is text: %j', (cell) => {
    expect(guarded(cell)).toBe(`'${cell}`);
  });

  it.each(['', 'Terminal never gets SIB1', '0.87', 'SKH/4187', '2026-01-01'])('that is text stays as it is: %j', (cell) => {
    expect(guarded(cell)).toBe(cell);
  });

  it('begins with nothing that computes, whatever the title', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary' }), (title) => !/^\s*[=+\-@＝＋－＠]/u.test(guarded(title))));
  });
});

describe('a file\'s name', () => {
  it.each([['../../etc/passwd', 'passwd'], ['C:\\temp\\cell.xml', 'cell.xml'], ['a\u0000b\r\n.yaml', 'ab.yaml'], ['exe.\u202Egpj', 'exe.gpj'], ['', 'unnamed'], ['..', 'unnamed'], ['   ', 'unnamed'], ['měření.iq', 'měření.iq']])('%j is shown as %j', (sent, shown) => {
    expect(displayName(sent)).toBe(shown);
  });

  it('is never empty, long, or more than one part', () => {
    fc.assert(fc.property(fc.string({ unit: 'binary', maxLength: 600 }), (sent) => {
      const shown = displayName(sent);
      // oxlint-disable-next-line no-control-regex
      return shown.length > 0 && [...shown].length <= 255 && !/[/\\\u0000-\u001f\ud800-\udfff]/u.test(shown);
    }));
  });
});

describe('the versions of a result', () => {
  const rights = (side: 'a' | 'b', reach: (typeof REACHES)[number], ...parties: string[]) => ({ side, reach, parties });

  it('are one for everyone where nothing is veiled', () => {
    expect(audiencesOf({ reach: 'everyone', partyId: 'lab' }, [rights('a', 'everyone', 'x'), rights('b', 'everyone', 'y')])).toEqual([{ partyId: null, view: { a: 'full', b: 'full' } }]);
  });

  it('are one more for each party that sees more than everyone', () => {
    const versions = audiencesOf({ reach: 'everyone', partyId: 'lab' }, [rights('a', 'compare-only', 'x', 'lab'), rights('b', 'compare-only', 'y', 'lab')]);
    expect(versions).toEqual([
      { partyId: null, view: { a: 'compare-only', b: 'compare-only' } }, { partyId: 'x', view: { a: 'full', b: 'compare-only' } },
      { partyId: 'lab', view: { a: 'full', b: 'full' } }, { partyId: 'y', view: { a: 'compare-only', b: 'full' } },
    ]);
  });

  it('are the party\'s own alone where the decode is its own', () => {
    expect(audiencesOf({ reach: 'my-party', partyId: 'y' }, [rights('a', 'compare-only', 'x'), rights('b', 'my-party', 'y')])).toEqual([{ partyId: 'y', view: { a: 'compare-only', b: 'full' } }]);
  });

  it('show nobody a side in full whom its reach does not name', () => {
    fc.assert(fc.property(fc.constantFrom(...REACHES), fc.constantFrom(...REACHES), fc.constantFrom('everyone', 'my-party'), (a, b, reach) => {
      const snapshots = [rights('a', a, 'x', 'lab'), rights('b', b, 'y')];
      return audiencesOf({ reach: reach as 'everyone', partyId: 'x' }, snapshots).every(({ partyId, view }) => snapshots.every(({ side, reach: of, parties }) =>
        view[side] !== 'full' || of === 'everyone' || (partyId !== null && parties.includes(partyId))));
    }));
  });
});
