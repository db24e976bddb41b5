import { ChevronDown } from "lucide-react";
import { Popover } from "radix-ui";
import { useEffect, useRef, useState } from "react";
import type { KeyboardEvent, ReactNode } from "react";
import { classNames } from "@/lib/class-names";
import { matchOptions, mostOptionsShown } from "./combobox-options";
import type { ComboboxOption } from "./combobox-options";
import { controlStyle } from "./control-style";
import { Field } from "./field";

const listStyle =
  "z-40 w-max max-w-[min(30rem,calc(100vw-2rem))] min-w-(--radix-popover-trigger-width) rounded-md " +
  "border border-hairline bg-raised text-ink shadow-raised";

const optionStyle =
  "flex min-h-9 cursor-pointer items-center justify-between gap-3 rounded-sm px-2.5 hover:bg-hover " +
  "aria-selected:font-semibold data-[active=true]:bg-accent-soft";

type ComboboxProps = {
  label: ReactNode;
  hideLabel?: boolean;
  hint?: ReactNode;
  error?: string;
  options: readonly ComboboxOption[];
  value: string | null;
  onChange: (value: string) => void;
  placeholder?: string;
  className?: string;
  disabled?: boolean;
};

/** One of many, found by typing any part of its name: a product, a store. */
export const Combobox = (props: ComboboxProps) => {
  const { label, hideLabel, hint, error, options, value, onChange, placeholder, className, disabled } = props;
  const [open, setOpen] = useState(false);
  const [text, setText] = useState("");
  const [active, setActive] = useState(0);
  const input = useRef<HTMLInputElement>(null);
  const chosen = options.find((option) => option.value === value);
  const matching = matchOptions(options, text);
  const shown = matching.slice(0, mostOptionsShown);

  const show = () => {
    if (open) return;
    setText("");
    setActive(
      Math.max(
        0,
        options.findIndex((option) => option.value === value),
      ),
    );
    setOpen(true);
  };
  const close = () => {
    setOpen(false);
    setText("");
  };
  const choose = (option: ComboboxOption | undefined) => {
    if (!option) return;
    onChange(option.value);
    close();
  };
  const move = (event: KeyboardEvent) => {
    const steps: Record<string, number> = { ArrowDown: 1, ArrowUp: -1, PageDown: 10, PageUp: -10 };
    if (event.key in steps) {
      event.preventDefault();
      if (!open) return show();
      setActive(Math.min(shown.length - 1, Math.max(0, active + steps[event.key])));
    } else if (event.key === "Enter" && open) {
      event.preventDefault();
      choose(shown[active]);
    } else if (event.key === "Escape" && open) {
      event.preventDefault();
      event.stopPropagation();
      close();
    } else if (event.key === "Tab") close();
  };

  return (
    <Field label={label} hideLabel={hideLabel} hint={hint} error={error} className={className}>
      {(wiring) => (
        <Popover.Root open={open} onOpenChange={(next) => (next ? show() : close())}>
          <Popover.Anchor asChild>
            <div className="relative">
              <input
                {...wiring}
                ref={input}
                role="combobox"
                aria-expanded={open}
                aria-controls={`${wiring.id}-list`}
                aria-autocomplete="list"
                aria-activedescendant={open && shown[active] ? `${wiring.id}-${active}` : undefined}
                autoComplete="off"
                spellCheck={false}
                disabled={disabled}
                value={open ? text : (chosen?.label ?? "")}
                placeholder={chosen?.label ?? placeholder}
                onChange={(event) => {
                  setOpen(true);
                  setText(event.target.value);
                  setActive(0);
                }}
                onClick={show}
                onKeyDown={move}
                onBlur={close}
                className={classNames(controlStyle, "pr-9 text-ellipsis")}
              />
              <ChevronDown
                className="pointer-events-none absolute top-2.5 right-3 size-4 text-muted"
                aria-hidden="true"
              />
            </div>
          </Popover.Anchor>
          <Popover.Portal>
            <Popover.Content
              role="presentation"
              align="start"
              sideOffset={4}
              collisionPadding={8}
              onOpenAutoFocus={(event) => event.preventDefault()}
              onCloseAutoFocus={(event) => event.preventDefault()}
              onInteractOutside={(event) => input.current?.contains(event.target as Node) && event.preventDefault()}
              className={listStyle}
            >
              <OptionList
                id={wiring.id}
                shown={shown}
                more={matching.length - shown.length}
                active={active}
                value={value}
                onChoose={choose}
              />
            </Popover.Content>
          </Popover.Portal>
        </Popover.Root>
      )}
    </Field>
  );
};

type OptionListProps = {
  id: string;
  shown: readonly ComboboxOption[];
  more: number;
  active: number;
  value: string | null;
  onChoose: (option: ComboboxOption) => void;
};

const OptionList = ({ id, shown, more, active, value, onChoose }: OptionListProps) => {
  const list = useRef<HTMLUListElement>(null);
  useEffect(() => {
    list.current?.querySelector('[data-active="true"]')?.scrollIntoView?.({ block: "nearest" });
  }, [active]);
  return (
    <>
      <ul ref={list} id={`${id}-list`} role="listbox" aria-label="Choices" className="max-h-72 overflow-y-auto p-1.5">
        {shown.map((option, index) => (
          <li
            key={option.value}
            id={`${id}-${index}`}
            role="option"
            aria-selected={option.value === value}
            data-active={index === active}
            // Pressing must not take the focus from the field before the choice is made.
            onMouseDown={(event) => event.preventDefault()}
            onClick={() => onChoose(option)}
            className={optionStyle}
          >
            <span className="truncate">{option.label}</span>
            {option.detail && <span className="shrink-0 text-sm font-normal text-muted">{option.detail}</span>}
          </li>
        ))}
      </ul>
      {shown.length === 0 && <p className="px-4 pb-3 text-muted">Nothing by that name.</p>}
      {more > 0 && (
        <p className="border-t border-hairline px-4 py-2 text-sm text-muted">{more} more: type to narrow.</p>
      )}
    </>
  );
};
