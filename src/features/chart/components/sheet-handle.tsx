import { Button } from '../../../components/button';

export const sheetHeights = ['low', 'half', 'full'] as const;
export type SheetHeight = (typeof sheetHeights)[number];
/** The map keeps to what the sheet leaves free, so that its middle is in sight. */
export const stageClass: Record<SheetHeight, string> = { low: 'max-md:h-[calc(100%-3rem)]', half: 'max-md:h-1/2', full: 'max-md:h-1/2' };
export const sheetClass: Record<SheetHeight, string> = { low: 'max-md:h-12', half: 'max-md:h-1/2', full: 'max-md:h-full' };

/** On a phone the page lies over the map at three heights. */
export function SheetHandle({ height, summary, onHeight }: { height: SheetHeight; summary: string; onHeight: (height: SheetHeight) => void }) {
  const at = sheetHeights.indexOf(height);
  return (
    <div className="flex h-12 shrink-0 items-center justify-between border-b border-rule pl-4 md:hidden print:hidden">
      <span className="truncate font-semibold">{summary}</span>
      <span className="flex">
        <Button kind="quiet" icon="down" aria-label="Lower the page" disabled={at === 0} onClick={() => onHeight(sheetHeights[at - 1] ?? 'low')} />
        <Button kind="quiet" icon="up" aria-label="Raise the page" disabled={at === 2} onClick={() => onHeight(sheetHeights[at + 1] ?? 'full')} />
      </span>
    </div>
  );
}
