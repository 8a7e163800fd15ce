import type { BlindOfdm, DetectionContext } from '../types.js';
export function estimateOfdm(_context: DetectionContext): BlindOfdm | null { return null; }
