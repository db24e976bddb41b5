import type { ComponentProps, ReactNode } from "react";
import { useId } from "react";

type CheckboxProps = Omit<ComponentProps<"input">, "type" | "id"> & { label: ReactNode; hint?: ReactNode };

export const Checkbox = ({ label, hint, ...rest }: CheckboxProps) => {
  const id = useId();
  return (
    <div className="grid grid-cols-[auto_1fr] items-start gap-x-2.5">
      <input
        {...rest}
        id={id}
        type="checkbox"
        aria-describedby={hint ? `${id}-hint` : undefined}
        className="mt-[3px] size-4 rounded-sm accent-accent"
      />
      <label htmlFor={id} className="text-base">
        {label}
      </label>
      {hint && (
        <p id={`${id}-hint`} className="col-start-2 text-sm text-muted">
          {hint}
        </p>
      )}
    </div>
  );
};
