import type { HintCode, HintSide } from '#shared/vocabulary';

/** What a decode should say of one value of the air. */
export type AirExpectation =
  | { readonly value: number; readonly tol: number; readonly alt?: number; readonly modulo?: number }
  | { readonly oneOf: readonly (string | number | boolean)[] }
  | { readonly isNull: true }
  | { readonly mib: Readonly<Record<string, string | number | boolean | readonly number[]>> };

export interface ExpectedHint {
  readonly code: HintCode;
  readonly side: readonly HintSide[];
}

/** What a decode should find. */
export interface Expectation {
  /** The hint that should stand first; null: none is due. */
  readonly hint: ExpectedHint | null;
  /** Other answers that the evidence leaves open. */
  readonly allowed: readonly ExpectedHint[];
  readonly air: Readonly<Record<string, AirExpectation>>;
  /** Nothing may be claimed about the air, and no hint is as good as the allowed ones. */
  readonly claimsNothing?: boolean;
  readonly noneAllowed?: boolean;
}
