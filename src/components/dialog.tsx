import { Description, DialogPanel, DialogTitle, Dialog as HeadlessDialog } from '@headlessui/react';
import type { ReactNode } from 'react';
import { Button } from './button';

type DialogProps = { isOpen: boolean; onClose: () => void; title: string; says?: ReactNode; actions?: ReactNode; width?: 'narrow' | 'wide'; children?: ReactNode };

/** A question or a small form over the page. Esc and the cross leave it; focus returns to where it came from. */
export function Dialog({ isOpen, onClose, title, says, actions, width = 'narrow', children }: DialogProps) {
  return (
    <HeadlessDialog open={isOpen} onClose={onClose} className="relative z-50">
      <div className="fixed inset-0 bg-[rgb(10_20_28/0.45)]" aria-hidden="true" />
      <div className="fixed inset-0 flex items-start justify-center overflow-y-auto p-0 sm:p-6 sm:pt-[10vh]">
        <DialogPanel className={`w-full border-t-4 border-t-kingfisher bg-paper sm:border-x sm:border-b sm:border-x-edge sm:border-b-edge max-sm:min-h-dvh sm:rounded-b-sm ${width === 'wide' ? 'sm:max-w-3xl' : 'sm:max-w-xl'}`}>
          <div className="flex items-center justify-between gap-4 border-b border-rule px-5 pt-4 pb-3 sm:px-7">
            <DialogTitle className="text-figure font-semibold text-balance">{title}</DialogTitle>
            <Button kind="quiet" icon="close" aria-label="Close" onClick={onClose} className="-mr-2" />
          </div>
          <div className="flex flex-col gap-5 px-5 py-5 sm:px-7">
            {says && (
              <Description as="div" className="text-ink2">
                {says}
              </Description>
            )}
            {children}
            {actions && <div className="flex flex-wrap items-center gap-3 border-t border-rule pt-4">{actions}</div>}
          </div>
        </DialogPanel>
      </div>
    </HeadlessDialog>
  );
}
