import { LADDERS, type LinkInterface } from '#shared/vocabulary';
import { Select } from './field.js';

export interface Rungs { downlink: string | null; uplink: string | null }

/** The last rung of access that was reached, for each direction. */
export function RungFields({ link, value, onChange }: { link: LinkInterface; value: Rungs; onChange: (value: Rungs) => void }) {
  const options = LADDERS[link].map((rung) => [rung, rung] as const);
  return (
    <>
      <Select label="Last rung reached, downlink" none="not known" value={value.downlink ?? ''} options={options} onChange={(e) => onChange({ ...value, downlink: e.target.value || null })} />
      <Select label="Last rung reached, uplink" none="not known" value={value.uplink ?? ''} options={options} onChange={(e) => onChange({ ...value, uplink: e.target.value || null })} />
    </>
  );
}
