import { DropdownMenu } from "radix-ui";
import type { ReactElement, ReactNode } from "react";
import { Icon } from "./icon.tsx";

/** `trigger` is a button; it gets `aria-expanded` and the like. */
export function Menu({ trigger, children, align = "end" }: { trigger: ReactElement; children: ReactNode; align?: "start" | "end" }) {
  return (
    <DropdownMenu.Root modal={false}>
      <DropdownMenu.Trigger asChild>{trigger}</DropdownMenu.Trigger>
      <DropdownMenu.Portal>
        <DropdownMenu.Content className="menu" align={align} sideOffset={5} collisionPadding={8} loop>
          {children}
        </DropdownMenu.Content>
      </DropdownMenu.Portal>
    </DropdownMenu.Root>
  );
}

export interface MenuItemProps {
  children: ReactNode;
  onSelect?: () => void;
  /** The child is a link that becomes the entry. */
  asChild?: boolean;
  /** Takes away for good. */
  danger?: boolean;
  impossible?: string | null;
}

export const MenuItem = ({ children, onSelect, asChild, danger, impossible }: MenuItemProps) => (
  <DropdownMenu.Item
    asChild={asChild}
    className={danger ? "danger" : undefined}
    disabled={Boolean(impossible)}
    title={impossible ?? undefined}
    onSelect={onSelect}
  >
    {children}
  </DropdownMenu.Item>
);

export const MenuRule = () => (
  <DropdownMenu.Separator asChild>
    <hr />
  </DropdownMenu.Separator>
);

export const MenuLabel = ({ children }: { children: ReactNode }) => <DropdownMenu.Label className="lab">{children}</DropdownMenu.Label>;

export interface MenuChoicesProps<Value extends string> {
  options: readonly { value: Value; word: string }[];
  value: Value;
  onChoose: (value: Value) => void;
}

/** Entries of which one is chosen. */
export function MenuChoices<Value extends string>({ options, value, onChoose }: MenuChoicesProps<Value>) {
  return (
    <DropdownMenu.RadioGroup value={value} onValueChange={(next) => onChoose(next as Value)}>
      {options.map((option) => (
        <DropdownMenu.RadioItem key={option.value} value={option.value}>
          <span className="tick">{option.value === value && <Icon name="check" size={14} />}</span>
          {option.word}
        </DropdownMenu.RadioItem>
      ))}
    </DropdownMenu.RadioGroup>
  );
}
