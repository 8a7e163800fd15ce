import type { Decode } from '#shared/api/decodes';
import type { Demodulation } from '#shared/decode';
import { Constellation } from '../../components/plots/constellation.js';
import { LinePlot, type Trace } from '../../components/plots/line-plot.js';
import { Section } from '../../components/ui/section.js';
import { duration } from '../../lib/units.js';

const evmTrace = (d: Demodulation): Trace[] =>
  d.evmBySubcarrier ? [{ curve: d.evmBySubcarrier, side: d.under, label: d.under === 'air' ? 'best found' : `under ${d.under.toUpperCase()}` }] : [];

const sameSettings = (x: Demodulation['settings'], y: Demodulation['settings']): boolean =>
  x.subcarrierSpacingHz === y.subcarrierSpacingHz && x.cyclicPrefix === y.cyclicPrefix;

/** The best settings found show only where neither side has them: else it would be one side's picture twice. */
const worthShowing = (all: readonly Demodulation[]): Demodulation[] =>
  all.filter((d) => d.under !== 'air' || !all.some((other) => other.under !== 'air' && sameSettings(other.settings, d.settings)));

/** The pictures on which the hints rest. */
export function Evidence({ decode }: { decode: Decode }) {
  const { result } = decode;
  const plots = result?.plots;
  if (!result || !plots || (!plots.spectrum && !plots.prefixCorrelation && plots.demodulations.length === 0)) return null;
  const from = [decode.captureName, result.capture?.durationS ? duration(result.capture.durationS) : null, `engine ${result.engine.version}`].filter(Boolean).join(', ');
  const demodulations = worthShowing(plots.demodulations);
  const evm = demodulations.flatMap(evmTrace);
  const three = plots.prefixCorrelation !== null && demodulations.length === 2;
  return (
    <Section title="Evidence" aside={`decode ${decode.number} of ${from}`}>
      <div className={three ? 'plots three' : 'plots'}>
        {plots.prefixCorrelation && <LinePlot title={plots.prefixCorrelation.title} traces={[{ curve: plots.prefixCorrelation, side: 'air' }]} height={three ? 270 : 240} zeroBased />}
        {demodulations.map((d) => <Constellation key={d.under} demodulation={d} />)}
        {evm.length > 0 && <LinePlot title="EVM by subcarrier" traces={evm} zeroBased />}
        {plots.spectrum && <LinePlot title={plots.spectrum.title} traces={[{ curve: plots.spectrum, side: 'air' }]} />}
      </div>
    </Section>
  );
}
