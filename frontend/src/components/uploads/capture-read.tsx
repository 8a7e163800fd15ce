import type { CaptureReading } from '#shared/api/files';
import { decibels, duration, frequency, grouped, percent, sampleRate } from '../../lib/units.js';
import { LinePlot } from '../plots/line-plot.js';

/** What was read from a capture: its facts with units, and a small spectrum. */
export function CaptureRead({ reading }: { reading: CaptureReading }) {
  const { facts, spectrum, warnings } = reading;
  const known: [string, string | null][] = [
    ['Format', [facts.format, facts.datatype].filter(Boolean).join(', ')],
    ['Rate', facts.sampleRateHz === null ? null : sampleRate(facts.sampleRateHz)],
    ['Centre', facts.centreFrequencyHz === null ? null : frequency(facts.centreFrequencyHz)],
    ['Duration', facts.durationS === null ? null : duration(facts.durationS)],
    ['Samples', facts.samples === null ? null : grouped(facts.samples)],
    ['Level', facts.rmsDbfs === null ? null : decibels(facts.rmsDbfs, 'dBFS rms')],
    ['Clipped', facts.clippedFraction === null ? null : percent(facts.clippedFraction * 100, 3)],
  ];
  return (
    <div className="capture-read">
      <dl className="facts">
        {known.map(([name, value]) => <div key={name}><dt>{name}</dt><dd className="fig">{value ?? <span className="soft words-only">not stated</span>}</dd></div>)}
      </dl>
      {spectrum && <LinePlot title="Spectrum" traces={[{ curve: spectrum }]} height={150} />}
      {warnings.map((warning) => <p key={warning} className="notice waits">{warning}</p>)}
    </div>
  );
}
