import { useEffect, useState } from 'react';

/** False at the first drawing, true from then on: a dialog that is mounted to be shown opens after it is there. */
export function useOpens(): boolean {
  const [open, setOpen] = useState(false);
  useEffect(() => setOpen(true), []);
  return open;
}
