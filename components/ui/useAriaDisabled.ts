import { useEffect, useRef } from 'react';

/**
 * Marks a control as one that cannot be pressed while it stays focusable. Pressable knows only `disabled`, which takes the
 * focus away too, and overwrites aria-disabled; so the mark is set on the element itself.
 */
export function useAriaDisabled(off: boolean) {
  const ref = useRef<HTMLElement>(null);
  useEffect(() => {
    if (off) ref.current?.setAttribute('aria-disabled', 'true');
    else ref.current?.removeAttribute('aria-disabled');
  }, [off]);
  return ref;
}
