import type { CaptureReading } from '#shared/api/files';
import { chooseWindows, readWindow } from '#engine/level/windows';
import { levelFacts } from '#engine/level/front-end';
import { spectrumCurve, spectrumOf } from '#engine/spectrum/spectrum';
import type { ByteSource } from '../captures/formats/bytes.js';
import { openCapture } from '../captures/formats/openCapture.js';
import type { ReadingRequest } from './reading.js';

/** Long enough for a level and a small spectrum, short enough to answer at once. */
const WINDOW_S = 0.01;
const SPECTRUM_POINTS = 256;

/** Format, rate, centre, duration, level and a small spectrum, from one window. Throws CaptureError. */
export function captureReading(request: ReadingRequest, bytes: ByteSource, data: ByteSource | null): CaptureReading {
  const opened = openCapture({
    name: request.name, bytes, beside: () => data,
    datatype: request.datatype, sampleRateHz: request.sampleRateHz, centreFrequencyHz: request.centreFrequencyHz,
  });
  const { samples, label } = opened;
  const [start = 0] = chooseWindows(samples, { windowS: WINDOW_S });
  const window = readWindow(samples, start, WINDOW_S);
  const level = levelFacts(window.iq);
  return {
    facts: {
      format: opened.format, datatype: label.datatype.name, sampleRateHz: label.sampleRateHz, centreFrequencyHz: label.centreFrequencyHz,
      samples: samples.samples, durationS: samples.samples / label.sampleRateHz,
      rmsDbfs: finite(level.rmsDbfs), clippedFraction: finite(level.clippedFraction),
    },
    spectrum: window.iq.length >= 512 ? spectrumCurve(spectrumOf(window.iq, label.sampleRateHz), SPECTRUM_POINTS) : null,
    warnings: [...opened.warnings],
  };
}

function finite(value: number): number | null {
  return Number.isFinite(value) ? value : null;
}
