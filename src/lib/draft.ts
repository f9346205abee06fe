import { useCallback, useEffect, useRef, useState } from 'react';

const PREFIX = 'tarewright.draft.';

/** What was typed under this key in this tab, else null. Survives a reload and an error boundary; ends with the tab. */
export function readDraft<T>(key: string): T | null {
  try {
    const text = sessionStorage.getItem(PREFIX + key);
    return text === null ? null : (JSON.parse(text) as T);
  } catch {
    return null;
  }
}

export function writeDraft(key: string, value: unknown): void {
  try {
    sessionStorage.setItem(PREFIX + key, JSON.stringify(value));
  } catch {
    // full or closed storage: the page still works, the draft then ends with it
  }
}

export function forgetDraft(key: string): void {
  try {
    sessionStorage.removeItem(PREFIX + key);
  } catch {
    // nothing was kept
  }
}

/** Signing out takes what was typed along: phones are shared. */
export function forgetAllDrafts(): void {
  try {
    for (const key of Object.keys(sessionStorage)) if (key.startsWith(PREFIX)) sessionStorage.removeItem(key);
  } catch {
    // nothing was kept
  }
}

/** State that survives a reload, a failed render and a detour through sign-in. `clear` begins anew. */
export function useDraft<T>(key: string, initial: () => T): [T, (change: T | ((now: T) => T)) => void, () => void] {
  const [value, setValue] = useState<T>(() => readDraft<T>(key) ?? initial());
  const cleared = useRef(false);
  useEffect(() => {
    if (cleared.current) cleared.current = false;
    else writeDraft(key, value);
  }, [key, value]);
  const clear = useCallback(() => {
    cleared.current = true;
    forgetDraft(key);
    setValue(initial());
  }, [key, initial]);
  return [value, setValue, clear];
}
