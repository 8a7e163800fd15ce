import type { LabelChange, Recording } from '#engine/evidence/recording';
import { parseDatatype } from '../captures/formats/datatype.js';
import type { OpenedCapture } from '../captures/formats/openCapture.js';
import type { SampleLabel } from '../captures/formats/sampleView.js';

/** Datatypes that recorders write, likeliest first (common practice). */
const COMMON = ['ci16_le', 'ci16_be', 'cf32_le', 'cf32_be', 'ci8', 'cu8', 'cu16_le', 'ci32_le', 'cf64_le'];

/** An opened capture as the engine takes it. */
export function recordingOf(capture: OpenedCapture): Recording {
  const { label, samples, payload } = capture;
  return {
    facts: {
      format: capture.format,
      datatype: label.datatype.name,
      sampleRateHz: label.sampleRateHz,
      centreFrequencyHz: label.centreFrequencyHz,
      samples: samples.samples,
      durationS: samples.samples / label.sampleRateHz,
      rmsDbfs: null,
      clippedFraction: null,
    },
    source: samples,
    under: (change) => capture.under(labelFrom(change)),
    datatypes: COMMON.filter((name) => name !== label.datatype.name && payload.bytes.size % (parseDatatype(name).sampleBytes * payload.channels) === 0),
    announcedGaps: capture.announcedGaps,
  };
}

function labelFrom({ datatype, swapIq, sampleRateHz }: LabelChange): Partial<SampleLabel> {
  return {
    ...(datatype !== undefined && { datatype: parseDatatype(datatype) }),
    ...(swapIq !== undefined && { swapIq }),
    ...(sampleRateHz !== undefined && { sampleRateHz }),
  };
}
