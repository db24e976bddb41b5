import { DropdownMenu } from "radix-ui";
import { Check } from "lucide-react";
import type { ReactNode } from "react";

/** A button's list of actions. Not modal: the modal kind adds a style element, which our policy refuses. */
export const Menu = ({ trigger, children }: { trigger: ReactNode; children: ReactNode }) => (
  <DropdownMenu.Root modal={false}>
    <DropdownMenu.Trigger asChild>{trigger}</DropdownMenu.Trigger>
    <DropdownMenu.Portal>
      <DropdownMenu.Content
        align="end"
        sideOffset={6}
        collisionPadding={8}
        className="z-40 min-w-56 rounded-md border border-hairline bg-raised p-1.5 text-ink shadow-raised"
      >
        {children}
      </DropdownMenu.Content>
    </DropdownMenu.Portal>
  </DropdownMenu.Root>
);

const itemStyle =
  "flex h-9 items-center gap-2.5 rounded-sm px-2.5 outline-none select-none data-[highlighted]:bg-accent-soft [&_svg]:size-4";

export const MenuItem = ({ children, onSelect }: { children: ReactNode; onSelect: () => void }) => (
  <DropdownMenu.Item className={itemStyle} onSelect={onSelect}>
    {children}
  </DropdownMenu.Item>
);

export const MenuNote = ({ children }: { children: ReactNode }) => (
  <DropdownMenu.Label className="px-2.5 py-1.5">{children}</DropdownMenu.Label>
);

export const MenuLine = () => <DropdownMenu.Separator className="my-1.5 h-px bg-hairline" />;

type MenuChoicesProps<Value extends string> = {
  label: string;
  choices: readonly { value: Value; label: string }[];
  value: Value;
  onChange: (value: Value) => void;
};

/** One of a few settings, kept in the menu. */
export const MenuChoices = <Value extends string>({ label, choices, value, onChange }: MenuChoicesProps<Value>) => (
  <DropdownMenu.RadioGroup value={value} aria-label={label}>
    <DropdownMenu.Label className="px-2.5 pt-1 pb-1 text-xs text-muted">{label}</DropdownMenu.Label>
    {choices.map((choice) => (
      <DropdownMenu.RadioItem
        key={choice.value}
        value={choice.value}
        className={`${itemStyle} justify-between`}
        onSelect={(event) => {
          event.preventDefault();
          onChange(choice.value);
        }}
      >
        {choice.label}
        <DropdownMenu.ItemIndicator>
          <Check className="text-accent" aria-hidden="true" />
        </DropdownMenu.ItemIndicator>
      </DropdownMenu.RadioItem>
    ))}
  </DropdownMenu.RadioGroup>
);
