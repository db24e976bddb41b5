/** What can be wrong between a layout and a file. */
export type LayoutErrorCode = "missing-columns";

/** The error that layouts throw: a code for programs and a sentence for people that names the columns. */
export class LayoutError extends Error {
  readonly code: LayoutErrorCode;

  constructor(code: LayoutErrorCode, message: string) {
    super(message);
    this.name = "LayoutError";
    this.code = code;
  }
}
