/**
 * Something that stopped a command and that a person can mend.
 * Its message is the whole of what they are shown: what happened, then what to do.
 */
export class Problem extends Error {
  /** @param {string} sentence */
  constructor(sentence) {
    super(sentence);
    this.name = "Problem";
  }
}

/** Thrown inside a command that was asked to stop: nothing went wrong, nothing is shown. */
export class Stopped extends Error {
  constructor() {
    super("stopped");
    this.name = "Stopped";
  }
}

/** @type {Record<string, (path: string) => string>} */
const systemSentences = {
  EACCES: (path) =>
    `No right to read or write ${path}: start as the user the folder belongs to, or give this one the right.`,
  EPERM: (path) => `No right to change ${path}: start as the user it belongs to, or give this one the right.`,
  EROFS: (path) => `${path} lies on a read-only disk: move the checkout to one that can be written.`,
  ENOSPC: (path) => `The disk that holds ${path} is full: free some space, then start again.`,
  EDQUOT: (path) => `The disk quota for ${path} is used up: free some space, then start again.`,
  EEXIST: (path) => `${path} is a file where a folder is needed: move it away, then start again.`,
  ENOTDIR: (path) => `${path} runs through a file where a folder is needed: move that file away, then start again.`,
  EMFILE: () => "Too many open files: raise the limit (ulimit -n 4096), then start again.",
};

/**
 * One sentence for whatever was thrown; never a stack trace.
 * @param {unknown} error
 * @returns {string}
 */
export function sentenceFor(error) {
  if (error instanceof Problem) return error.message;
  if (!(error instanceof Error)) return `Something unexpected went wrong: ${String(error)}.`;
  const { code, path } = /** @type {NodeJS.ErrnoException} */ (error);
  const known = code === undefined ? undefined : systemSentences[code];
  if (known) return known(path ?? "the project's folder");
  const firstLine = error.message.split("\n")[0];
  return `Something unexpected went wrong: ${firstLine} (set SHELFTIDE_DEBUG=1 to see where).`;
}
