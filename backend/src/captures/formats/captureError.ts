/** What can be wrong with a capture, in words that code may rely on. */
export type CaptureErrorCode =
  | 'not-found'
  | 'unreadable'
  | 'empty'
  | 'truncated'
  | 'odd-byte-count'
  | 'malformed-metadata'
  | 'incomplete-metadata'
  | 'unsupported-datatype'
  | 'missing-data-file'
  | 'missing-label'
  | 'mislabelled'
  | 'compressed'
  | 'unsafe-archive'
  | 'unsupported-format'
  | 'too-large'
  | 'not-yet-supported';

export interface Place {
  /** Byte offset in the file, where one is known. */
  readonly offset?: number;
  /** Key path or line in the metadata, where one is known. */
  readonly key?: string;
}

/** A capture that cannot be read. The message says what is wrong, where, and what to do. */
export class CaptureError extends Error {
  readonly offset: number | undefined;
  readonly key: string | undefined;

  constructor(readonly code: CaptureErrorCode, message: string, place: Place = {}) {
    super(message);
    this.name = 'CaptureError';
    this.offset = place.offset;
    this.key = place.key;
  }
}
