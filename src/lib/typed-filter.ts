import { useEffect, useRef, useState } from 'react';

const PAUSE_MS = 250;

/**
 * A search field's text: what is typed shows at once, and is handed on when typing pauses. A value that changes from
 * elsewhere (back, a cleared filter) is taken over.
 */
export function useTypedFilter(value: string, onSettled: (value: string) => void): [string, (typed: string) => void] {
  const [typed, setTyped] = useState(value);
  const handed = useRef(value);
  const settle = useRef(onSettled);
  settle.current = onSettled;
  useEffect(() => {
    if (value === handed.current) return;
    handed.current = value;
    setTyped(value);
  }, [value]);
  useEffect(() => {
    const text = typed.trim();
    if (text === handed.current) return;
    const timer = setTimeout(() => {
      handed.current = text;
      settle.current(text);
    }, PAUSE_MS);
    return () => clearTimeout(timer);
  }, [typed]);
  return [typed, setTyped];
}
