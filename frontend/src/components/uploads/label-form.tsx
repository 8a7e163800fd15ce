import { useState } from 'react';
import { DATATYPES } from '../../lib/uploads/kinds.js';
import type { UploadItem } from '../../lib/uploads/queue.js';
import type { Uploads } from '../../lib/uploads/use-uploads.js';
import { Select, TextField } from '../ui/field.js';

const positive = (text: string, scale: number): number | undefined => {
  const value = Number(text.replace(',', '.')) * scale;
  return Number.isFinite(value) && value > 0 ? value : undefined;
};

/** What raw I/Q (and WAV, for its centre) does not say of itself. */
export function LabelForm({ item, uploads, raw }: { item: UploadItem; uploads: Uploads; raw: boolean }) {
  const [datatype, setDatatype] = useState(item.labels.datatype ?? '');
  const [rate, setRate] = useState('');
  const [centre, setCentre] = useState('');
  const sampleRateHz = positive(rate, 1e6);
  const ready = raw ? datatype !== '' && sampleRateHz !== undefined : positive(centre, 1e6) !== undefined;
  const send = (): void => uploads.resend(item.key, {
    labels: { ...(raw ? { datatype, sampleRateHz } : {}), centreFrequencyHz: positive(centre, 1e6) },
  });
  return (
    <div className="fields label-form">
      {raw && <Select label="Sample format" none="choose" value={datatype} options={DATATYPES.map((d) => [d, d] as const)} onChange={(e) => setDatatype(e.target.value)} />}
      {raw && <TextField label="Sample rate, Msps" figures inputMode="decimal" value={rate} onChange={(e) => setRate(e.target.value)} />}
      <TextField label="Centre, MHz" figures inputMode="decimal" hint="May be left out; is then unknown." value={centre} onChange={(e) => setCentre(e.target.value)} />
      <div className="field"><span className="label" aria-hidden="true">&nbsp;</span><button type="button" className="button" disabled={!ready} onClick={send}>{item.stored ? 'Read again with this' : 'Send'}</button></div>
    </div>
  );
}
