/** Why a file cannot be read at all, and where. The only error the readers throw. */
export class CaptureError extends Error {
  override readonly name = 'CaptureError';
  constructor(
    /** Stable word such as `empty-file`, `not-a-capture`, `no-channels`. */
    readonly code: string,
    message: string,
    readonly place: { readonly line?: number; readonly column?: number; readonly byte?: number } = {},
  ) {
    super(message);
  }

  /** The place in words: `line 3, column 9, byte 120`; empty where there is none. */
  get where(): string {
    const { line, column, byte } = this.place;
    const parts = [
      line === undefined ? '' : `line ${line}`,
      column === undefined ? '' : `column ${column}`,
      byte === undefined ? '' : `byte ${byte}`,
    ];
    return parts.filter((part) => part !== '').join(', ');
  }
}
