import { Tab, TabGroup, TabList, TabPanel, TabPanels } from '@headlessui/react';
import type { ReactNode } from 'react';

export type TabItem = { id: string; label: ReactNode; content: ReactNode };

/** Leaves of one page. Arrow keys move between them. */
export function Tabs({ label, items, selectedId, onSelect, className = '' }: { label: string; items: readonly TabItem[]; selectedId?: string; onSelect?: (id: string) => void; className?: string }) {
  const chosen = selectedId === undefined ? undefined : Math.max(0, items.findIndex((item) => item.id === selectedId));
  return (
    <TabGroup {...(chosen === undefined ? {} : { selectedIndex: chosen })} onChange={(index) => onSelect?.(items[index]?.id ?? '')} className={className}>
      <TabList aria-label={label} className="flex overflow-x-auto border-b border-edge">
        {items.map((item) => (
          <Tab
            key={item.id}
            className="-mb-px min-h-10 border-b-3 border-transparent px-3 whitespace-nowrap text-ink2 outline-offset-[-2px] first:pl-0 hover:text-kingfisher data-selected:border-kingfisher data-selected:font-semibold data-selected:text-ink pointer-coarse:min-h-11"
          >
            {item.label}
          </Tab>
        ))}
      </TabList>
      <TabPanels>
        {items.map((item) => (
          <TabPanel key={item.id} className="pt-4">
            {item.content}
          </TabPanel>
        ))}
      </TabPanels>
    </TabGroup>
  );
}
