/** The mark: a shelf on its brackets, the tide under it, the floor. */
export const LogoMark = ({ className }: { className?: string }) => (
  <svg
    viewBox="0 0 28 24"
    className={className}
    fill="none"
    stroke="currentColor"
    strokeWidth="2.25"
    strokeLinecap="round"
    strokeLinejoin="round"
    aria-hidden="true"
  >
    <path d="M2 3.5h24M7 3.5v3.25M21 3.5v3.25" />
    <path d="M2 14.25c3.1-4.4 6.1-4.4 9-.9s5.9 3.5 8.7.1 5-2.9 6.3-1.3" />
    <path d="M2 20.5h24" />
  </svg>
);
