import { classNames } from "@/lib/class-names";

/** The ground where contents will stand, in their size, so that nothing jumps. */
export const Skeleton = ({ className }: { className?: string }) => (
  <div aria-hidden="true" className={classNames("animate-pulse rounded-sm bg-grid", className)} />
);

/** A whole view that is loading: says so to screen readers, shows its outline to the others. */
export const LoadingState = ({ label, rows = 6 }: { label: string; rows?: number }) => (
  <div role="status" className="flex flex-col gap-3 p-1">
    <span className="sr-only">{label}</span>
    {Array.from({ length: rows }, (_, index) => (
      <Skeleton key={index} className={index === 0 ? "h-6 w-1/3" : "h-9 w-full"} />
    ))}
  </div>
);
