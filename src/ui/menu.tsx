import { DropdownMenu as Radix } from 'radix-ui';
import type { ReactElement, ReactNode } from 'react';

export interface MenuProps {
  /** The button that opens it; it takes `ref` and the props of a button. */
  readonly trigger: ReactElement;
  readonly children: ReactNode;
  readonly align?: 'start' | 'end';
  /** Open from the first drawing: for a menu that is loaded when its button is pressed. */
  readonly startsOpen?: boolean;
}

/** Its items stand beside the trigger in the page's order, so they stay inside the landmark they belong to. */
export function Menu({ trigger, children, align = 'end', startsOpen = false }: MenuProps) {
  return (
    <Radix.Root modal={false} defaultOpen={startsOpen}>
      <Radix.Trigger asChild>{trigger}</Radix.Trigger>
      <Radix.Content align={align} sideOffset={6} collisionPadding={8} className="float min-w-48 py-1">
        {children}
      </Radix.Content>
    </Radix.Root>
  );
}

/** A link inside a menu: `<MenuLink><Link to=…>…</Link></MenuLink>`. */
export function MenuLink({ children }: { children: ReactElement }) {
  return (
    <Radix.Item asChild className="menu-item">
      {children}
    </Radix.Item>
  );
}

export function MenuAct({ children, onSelect }: { children: ReactNode; onSelect: () => void }) {
  return (
    <Radix.Item className="menu-item" onSelect={onSelect}>
      {children}
    </Radix.Item>
  );
}

export interface MenuChoiceProps<T extends string> {
  readonly label: string;
  readonly options: readonly { readonly value: T; readonly label: string }[];
  readonly value: T;
  readonly onChange: (value: T) => void;
}

/** One of a few inside a menu; the chosen one is marked with a square. */
export function MenuChoice<T extends string>({ label, options, value, onChange }: MenuChoiceProps<T>) {
  return (
    <>
      <Radix.Label className="lab px-4 pt-2 pb-1">{label}</Radix.Label>
      <Radix.RadioGroup value={value}>
        {options.map((option) => (
          <Radix.RadioItem
            key={option.value}
            value={option.value}
            className="menu-item"
            onSelect={(event) => {
              event.preventDefault();
              onChange(option.value);
            }}
          >
            {option.label}
            <Radix.ItemIndicator className="size-2 bg-green" />
          </Radix.RadioItem>
        ))}
      </Radix.RadioGroup>
    </>
  );
}

export function MenuRule() {
  return <Radix.Separator className="my-1 border-t border-rule" />;
}
