import { type RefObject, useEffect, useRef } from 'react';

/** The first field has the keyboard; Escape goes back without an entry. */
export function useKeyboardForm(onClose: () => void): RefObject<HTMLFormElement | null> {
  const form = useRef<HTMLFormElement>(null);
  const close = useRef(onClose);
  useEffect(() => {
    close.current = onClose;
  });
  useEffect(() => {
    form.current?.querySelector<HTMLElement>('input, select, textarea, [role="radio"]')?.focus({ preventScroll: true });
    const leave = (event: KeyboardEvent) => {
      if (event.key === 'Escape') close.current();
    };
    window.addEventListener('keydown', leave);
    return () => window.removeEventListener('keydown', leave);
  }, []);
  return form;
}
