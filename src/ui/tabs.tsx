import { Tabs as Radix } from 'radix-ui';
import type { ReactNode } from 'react';

export interface Tab {
  readonly value: string;
  readonly label: ReactNode;
  readonly content: ReactNode;
}

export interface TabsProps {
  readonly label: string;
  readonly tabs: readonly Tab[];
  readonly value: string;
  readonly onChange: (value: string) => void;
}

export function Tabs({ label, tabs, value, onChange }: TabsProps) {
  return (
    <Radix.Root value={value} onValueChange={onChange}>
      <Radix.List aria-label={label} className="tab-list">
        {tabs.map((tab) => (
          <Radix.Trigger key={tab.value} value={tab.value} className="tab">
            {tab.label}
          </Radix.Trigger>
        ))}
      </Radix.List>
      {tabs.map((tab) => (
        <Radix.Content key={tab.value} value={tab.value} className="pt-4">
          {tab.content}
        </Radix.Content>
      ))}
    </Radix.Root>
  );
}
