/** A file that cannot be used at all, whatever its rows hold; the message is for the person who sent it. */
export class UnreadableFile extends Error {
  /** Stable, kebab-case. */
  readonly code: string;

  constructor(code: string, detail: string) {
    super(detail);
    this.name = "UnreadableFile";
    this.code = code;
  }
}
