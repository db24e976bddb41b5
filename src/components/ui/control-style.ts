/** What every box a person types or chooses in shares. */
export const controlStyle =
  "h-9 w-full min-w-0 rounded-sm border border-control bg-sheet px-3 text-base text-ink placeholder:text-muted " +
  "transition-colors hover:border-ink/60 focus-visible:outline-offset-0 disabled:opacity-60 aria-invalid:border-danger";
