import { useEffect, useRef } from 'react';

/**
 * Marks a control as one that cannot be pressed while it stays focusable. Pressable knows only `disabled`, which takes the
 * focus away too, and overwrites aria-disabled; so the mark is set on the element itself. `because` is read with it.
 */
export function useAriaDisabled(off: boolean, because?: string | null) {
  const ref = useRef<HTMLElement>(null);
  useEffect(() => {
    const mark = (name: string, value: string | null | undefined) =>
      value ? ref.current?.setAttribute(name, value) : ref.current?.removeAttribute(name);
    mark('aria-disabled', off ? 'true' : null);
    mark('aria-description', off ? because : null);
  }, [off, because]);
  return ref;
}
