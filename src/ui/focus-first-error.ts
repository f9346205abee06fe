import { useEffect } from 'react';

/** After a refused submission the first field with something wrong is brought into view and takes the focus. */
export function useFocusFirstError(errors: readonly unknown[]): void {
  useEffect(() => {
    if (errors.length === 0) return;
    const field = document.querySelector<HTMLElement>('form [aria-invalid="true"], form [role="alert"]');
    field?.scrollIntoView?.({ block: 'center' });
    field?.focus({ preventScroll: true });
  }, [errors]);
}
