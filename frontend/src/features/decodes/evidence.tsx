import type { Decode } from '#shared/api/decodes';
import type { Demodulation } from '#shared/decode';
import { Constellation } from '../../components/plots/constellation.js';
import { LinePlot, type Trace } from '../../components/plots/line-plot.js';
import { Section } from '../../components/ui/section.js';
import { duration } from '../../lib/units.js';

const evmTrace = (d: Demodulation): Trace[] =>
  d.evmBySubcarrier ? [{ curve: d.evmBySubcarrier, side: d.under, label: d.under === 'air' ? 'best found' : `under ${d.under.toUpperCase()}` }] : [];

/** The pictures on which the hints rest. */
export function Evidence({ decode }: { decode: Decode }) {
  const { result } = decode;
  const plots = result?.plots;
  if (!result || !plots || (!plots.spectrum && !plots.prefixCorrelation && plots.demodulations.length === 0)) return null;
  const from = [decode.captureName, result.capture?.durationS ? duration(result.capture.durationS) : null, `engine ${result.engine.version}`].filter(Boolean).join(', ');
  const evm = plots.demodulations.flatMap(evmTrace);
  const three = plots.prefixCorrelation !== null && plots.demodulations.length === 2;
  return (
    <Section title="Evidence" aside={`decode ${decode.number} of ${from}`}>
      <div className={three ? 'plots three' : 'plots'}>
        {plots.prefixCorrelation && <LinePlot title={plots.prefixCorrelation.title} traces={[{ curve: plots.prefixCorrelation, side: 'air' }]} height={three ? 270 : 240} zeroBased />}
        {plots.demodulations.map((d) => <Constellation key={d.under} demodulation={d} />)}
        {evm.length > 0 && <LinePlot title="EVM by subcarrier" traces={evm} zeroBased />}
        {plots.spectrum && <LinePlot title={plots.spectrum.title} traces={[{ curve: plots.spectrum, side: 'air' }]} />}
      </div>
    </Section>
  );
}
