import { ToggleGroup } from "radix-ui";
import { classNames } from "@/lib/class-names";

export type Segment<Value extends string> = {
  value: Value;
  label: string;
  /** Colours the segment in use. */ driver?: string;
};

type SegmentedControlProps<Value extends string> = {
  label: string;
  segments: readonly Segment<Value>[];
  value: Value;
  onChange: (value: Value) => void;
  className?: string;
};

/** One of two to six views of the same thing; arrow keys move, and one is always chosen. */
export const SegmentedControl = <Value extends string>(props: SegmentedControlProps<Value>) => {
  const { label, segments, value, onChange, className } = props;
  return (
    <ToggleGroup.Root
      type="single"
      value={value}
      aria-label={label}
      onValueChange={(text) => {
        const chosen = segments.find((segment) => segment.value === text);
        if (chosen) onChange(chosen.value);
      }}
      className={classNames(
        "inline-flex max-w-full overflow-x-auto rounded-sm border border-control bg-sheet print:hidden",
        className,
      )}
    >
      {segments.map((segment) => (
        <ToggleGroup.Item
          key={segment.value}
          value={segment.value}
          data-driver={segment.driver}
          className={classNames(
            "h-[34px] shrink-0 border-r border-hairline px-3.5 font-medium text-muted transition-colors last:border-r-0 max-sm:px-2 max-sm:text-sm",
            "first:rounded-l-[5px] last:rounded-r-[5px] hover:bg-hover hover:text-ink focus-visible:-outline-offset-2",
            segment.driver
              ? "data-[state=on]:bg-driver-soft data-[state=on]:text-driver-text"
              : "data-[state=on]:bg-accent-soft data-[state=on]:text-accent",
          )}
        >
          {segment.label}
        </ToggleGroup.Item>
      ))}
    </ToggleGroup.Root>
  );
};
