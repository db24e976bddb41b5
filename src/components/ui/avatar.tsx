/** A person by their initials; the name is said beside it or by the button around it. */
export const Avatar = ({ initials }: { initials: string }) => (
  <span
    aria-hidden="true"
    className="inline-flex size-8 items-center justify-center rounded-full bg-accent-soft text-xs font-semibold text-accent"
  >
    {initials}
  </span>
);
