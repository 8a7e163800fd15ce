import type { DecodeResult } from '#shared/decode';
import { decide } from '../../backend/src/hints/decide.js';
import { lookNext } from '../../backend/src/hints/look-next.js';
import { FULL_VIEW } from '../../backend/src/hints/types.js';
import { writeHint } from '../../backend/src/hints/wording/writeHint.js';
import { evidenceOf, type Scene } from './evidence.js';

/** A result as the decode builds it, from stated air values. */
export function decideAndWrite(scene: Scene): DecodeResult {
  const evidence = evidenceOf(scene);
  const findings = decide(evidence);
  return {
    contract: 1, engine: { name: 'test', version: '0' },
    inputs: [
      { file: 'capture.wav', sha256: 'cccccccc', of: 'capture' }, { file: 'side-a.json', sha256: 'aaaaaaaa', of: 'a' }, { file: 'side-b.yaml', sha256: 'bbbbbbbb', of: 'b' },
    ] as DecodeResult['inputs'],
    capture: evidence.capture, air: { ...evidence.air }, comparison: [...evidence.comparison.rows],
    hints: findings.map((finding) => writeHint(finding, FULL_VIEW)), tried: [], lookNext: lookNext(evidence, findings), timingMs: { read: 0, decode: 0, total: 0 }, plots: null,
  };
}
