import { useId } from "react";
import type { ReactNode } from "react";
import { classNames } from "@/lib/class-names";

export type FieldWiring = { id: string; "aria-describedby"?: string; "aria-invalid"?: true };

type FieldProps = {
  label: ReactNode;
  /** Stays in the page for those who cannot see the layout. */
  hideLabel?: boolean;
  hint?: ReactNode;
  error?: string;
  className?: string;
  children: (wiring: FieldWiring) => ReactNode;
};

/** Label, control, hint and error, wired together for screen readers. */
export const Field = ({ label, hideLabel = false, hint, error, className, children }: FieldProps) => {
  const id = useId();
  const described = [hint ? `${id}-hint` : "", error ? `${id}-error` : ""].filter(Boolean).join(" ");
  return (
    <div className={classNames("flex min-w-0 flex-col gap-1.5", className)}>
      <label htmlFor={id} className={hideLabel ? "sr-only" : "text-sm font-medium text-ink"}>
        {label}
      </label>
      {children({ id, "aria-describedby": described || undefined, "aria-invalid": error ? true : undefined })}
      {hint && (
        <p id={`${id}-hint`} className="text-sm text-muted">
          {hint}
        </p>
      )}
      {error && (
        <p id={`${id}-error`} className="text-sm font-medium text-danger">
          {error}
        </p>
      )}
    </div>
  );
};
