export type SnapshotErrorCode =
  | 'too-large' | 'empty' | 'binary' | 'encoding' | 'line-too-long' | 'too-deep' | 'too-many-values'
  | 'doctype' | 'syntax' | 'unknown-syntax' | 'glossary';

/** A file that cannot be read: what is wrong, where, and what to do. `line` and `offset` count from 1 and 0. */
export class SnapshotError extends Error {
  override readonly name = 'SnapshotError';
  constructor(
    readonly code: SnapshotErrorCode,
    message: string,
    readonly place: { line?: number; offset?: number } = {},
  ) {
    super(message);
  }

  get line(): number | undefined { return this.place.line; }
  get offset(): number | undefined { return this.place.offset; }
}
