import { airNumber, airWord } from './measurements/numbers.js';
import { FRONT_END } from './priors.js';
import type { Evidence, Finding } from './types.js';

export interface Place {
  readonly place: string;
  readonly why: string;
}

/** Places that rest on what a snapshot holds or lacks: not for readers who may not know of it. */
export const ONE_SIDED_PLACE = 'settings that only one side declares';

/** A place with how much the measurements point there; the three likeliest are shown. */
interface Candidate extends Place {
  readonly weight: number;
}

/** Where to look when nothing, or nothing sure, was found: from the measurements, likeliest first. */
export function lookNext(evidence: Evidence, findings: readonly Finding[]): Place[] {
  if (findings.some((finding) => finding.probability >= 0.9)) return [];
  return [...received(evidence), ...clocks(evidence), ...undeclared(evidence), ...always(evidence)]
    .sort((x, y) => y.weight - x.weight).slice(0, 3).map(({ place, why }) => ({ place, why }));
}

function received(evidence: Evidence): Candidate[] {
  const { capture } = evidence;
  if (!capture) return [{ place: 'a capture of the link', why: 'no mismatch found between the files; only the air shows whether the radios do what their files say', weight: 10 }];
  const places: Candidate[] = [];
  if (evidence.air['technology']?.value === null) {
    places.push({ place: 'what was recorded', why: 'no OFDM is found: check that the transmitter was on, the tuning, and the signal path', weight: 9 });
  }
  const snr = airNumber(evidence, 'snrDb');
  if (snr && snr.value < 12) places.push({ place: 'receive level', why: `the signal stands only ${snr.value.toFixed(1)} dB above the noise; high orders need more`, weight: 6 });
  if (capture.rmsDbfs !== null && capture.rmsDbfs > -6) places.push({ place: 'receive level', why: `the recording stands at ${capture.rmsDbfs.toFixed(1)} dBFS: peaks may be clipped`, weight: 5 });
  return [...places, ...frontEnd(evidence)];
}

function frontEnd(evidence: Evidence): Candidate[] {
  const image = airNumber(evidence, 'iqImbalanceDb');
  const dc = airNumber(evidence, 'dcOffsetDb');
  return [
    ...(image && image.value > FRONT_END.iqImbalanceDb - 10 ? [{ place: 'the recorder\'s I/Q balance', why: `an image stands ${(-image.value).toFixed(1)} dB below the signal`, weight: 3 }] : []),
    ...(dc && dc.value > FRONT_END.dcOffsetDb - 10 ? [{ place: 'the recorder\'s DC offset', why: `a line stands ${(-dc.value).toFixed(1)} dB below the signal at the recording's centre`, weight: 3 }] : []),
  ];
}

function clocks(evidence: Evidence): Candidate[] {
  const clock = airNumber(evidence, 'sampleClockOffsetPpm');
  if (!clock || Math.abs(clock.value) < 0.5) return [];
  return [{ place: 'reference clock', why: `transmitter and recorder differ by ${clock.value.toFixed(2)} ppm: lock both to one reference and see whether it stays`, weight: 2 + Math.min(4, Math.abs(clock.value)) }];
}

function undeclared(evidence: Evidence): Candidate[] {
  const oneSided = evidence.comparison.rows.filter((row) => row.verdict === 'one-sided').length;
  const missing = (['a', 'b'] as const).filter((side) => !evidence.given[side]).map((side) => side.toUpperCase());
  return [
    ...(missing.length > 0 ? [{ place: missing.length === 2 ? 'the running configuration of both sides' : `side ${missing[0]}'s running configuration`, why: 'without it nothing can be held against the other side', weight: 7 }] : []),
    ...(oneSided > 0 && missing.length === 0 ? [{ place: ONE_SIDED_PLACE, why: `${oneSided} of the compared settings stand in one file only`, weight: 2.5 }] : []),
  ];
}

/** What the trade finds behind links whose settings agree (common practice). */
function always(evidence: Evidence): Candidate[] {
  const burst = airWord(evidence, 'technology') === 'wifi';
  return [
    { place: 'host timing', why: 'settings agree with the air; late packets and overflows show in the hosts\' own counters', weight: 2.2 },
    { place: burst ? 'association policy' : 'the terminal\'s policy', why: burst ? 'the frames decode; security settings and access lists are not on the air' : 'the broadcast decodes; barring, the network\'s identity and access lists are decided above it', weight: 2 },
    { place: 'the next step of access', why: 'the physical layer decodes here; compare the logs of both sides at the last rung reached', weight: 1.5 },
  ];
}
