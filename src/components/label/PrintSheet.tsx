import { createPortal } from 'react-dom';
import { Label } from './Label.tsx';
import type { LabelContent, LabelSize } from './label-content.ts';

/** Only this is printed: one page a label, each exactly the label's size. */
export function PrintSheet({ content, size, copies }: { content: LabelContent; size: LabelSize; copies: number }) {
  return createPortal(
    <div className="print-only" aria-hidden="true">
      {Array.from({ length: copies }, (_, copy) => (
        <Label key={copy} content={content} size={size} />
      ))}
    </div>,
    document.body,
  );
}
