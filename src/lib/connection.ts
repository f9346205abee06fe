import { useSyncExternalStore } from 'react';

function subscribe(listener: () => void): () => void {
  window.addEventListener('online', listener);
  window.addEventListener('offline', listener);
  return () => {
    window.removeEventListener('online', listener);
    window.removeEventListener('offline', listener);
  };
}

/** What the browser believes about the network; false is certain, true is a hope. */
export const useOnline = (): boolean => useSyncExternalStore(subscribe, () => navigator.onLine);
