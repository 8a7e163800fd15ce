import { SIGNAL_PATHS, type SignalPath } from '#shared/api/issues';
import { Select, TextField } from './field.js';

const numeric = (text: string): number | null => {
  const value = Number(text.replace(',', '.').replace('−', '-'));
  return text.trim() === '' || !Number.isFinite(value) ? null : value;
};

/** How the signal came to the receiver and the recorder, and on whose clock. */
export function SignalPathFields({ value, onChange }: { value: SignalPath; onChange: (value: SignalPath) => void }) {
  const set = (change: Partial<SignalPath>): void => onChange({ ...value, ...change });
  return (
    <fieldset className="fields">
      <legend className="legend hidden-text">Signal path and clocks</legend>
      <Select label="Signal path" none="not known" value={value.path ?? ''} options={SIGNAL_PATHS.map((p) => [p, p] as const)} onChange={(e) => set({ path: (e.target.value || null) as SignalPath['path'] })} />
      <TextField label="Attenuation, dB" figures inputMode="decimal" defaultValue={value.attenuationDb ?? ''} onChange={(e) => set({ attenuationDb: numeric(e.target.value) })} />
      <TextField label="Level at the receiver, dBm" figures inputMode="text" defaultValue={value.levelDbm ?? ''} onChange={(e) => set({ levelDbm: numeric(e.target.value) })} />
      <TextField label="Clock source" maxLength={120} value={value.clockSource ?? ''} hint="Common 10 MHz, satellite, free running …" onChange={(e) => set({ clockSource: e.target.value || null })} />
      <TextField label="Late and overflow counters" maxLength={300} value={value.lateCounters ?? ''} hint="How many, in how long." onChange={(e) => set({ lateCounters: e.target.value || null })} />
    </fieldset>
  );
}
