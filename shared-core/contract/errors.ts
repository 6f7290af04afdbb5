/** Everything that can go wrong at the boundary, by name; each comes with a sentence for people. */
export const errorCodes = [
  'bad-input',
  'unknown-method',
  'not-found',
  'conflict',
  'cancelled',
  'too-large',
  'store-busy',
  'store-newer',
  'store-damaged',
  'internal',
] as const;
export type ErrorCode = (typeof errorCodes)[number];

/** A failure that the other side is told: code, sentence (what happened, to what, what to do), JSON-safe details. */
export class AppError extends Error {
  override readonly name = 'AppError';
  readonly code: ErrorCode;
  readonly details: Readonly<Record<string, string | number | boolean | null>>;

  constructor(
    code: ErrorCode,
    message: string,
    details: Readonly<Record<string, string | number | boolean | null>> = {},
  ) {
    super(message);
    this.code = code;
    this.details = details;
  }
}

/** What every call answers with; a reply, never a rejection. */
export type Envelope<T> =
  | { readonly ok: true; readonly value: T }
  | {
      readonly ok: false;
      readonly error: {
        readonly code: ErrorCode;
        readonly message: string;
        readonly details: Readonly<Record<string, string | number | boolean | null>>;
      };
    };
