/** Says that a press was taken; for work with a known length use `ProgressBar`. */
export const Spinner = () => (
  <svg viewBox="0 0 16 16" className="size-4 animate-spin" fill="none" aria-hidden="true">
    <circle cx="8" cy="8" r="6" stroke="currentColor" strokeOpacity="0.25" strokeWidth="2" />
    <path d="M14 8a6 6 0 0 0-6-6" stroke="currentColor" strokeWidth="2" strokeLinecap="round" />
  </svg>
);
