import type { ReactNode } from "react";

type EmptyStateProps = {
  title: string;
  /** What the place is for and what to do next. */
  children: ReactNode;
  action?: ReactNode;
  /** "h1" where it is all the page has. */
  heading?: "h1" | "h2";
};

/** Nothing here yet: says what would stand here and how to get it. */
export const EmptyState = ({ title, children, action, heading: Heading = "h2" }: EmptyStateProps) => (
  <div className="flex flex-col items-center px-6 py-12 text-center">
    <svg viewBox="0 0 120 44" className="mb-5 w-32 text-control" fill="none" stroke="currentColor" aria-hidden="true">
      <path d="M4 6h112M20 6v6M100 6v6" strokeWidth="2" strokeLinecap="round" />
      <path
        d="M4 28c14-12 27-12 40-2s26 10 38 0 26-8 34-2"
        strokeWidth="2"
        strokeDasharray="2 5"
        strokeLinecap="round"
      />
      <path d="M4 40h112" strokeWidth="2" strokeLinecap="round" />
    </svg>
    <Heading className="text-lg font-semibold">{title}</Heading>
    <div className="mt-1 max-w-md text-muted">{children}</div>
    {action && <div className="mt-5 flex flex-wrap justify-center gap-3">{action}</div>}
  </div>
);
