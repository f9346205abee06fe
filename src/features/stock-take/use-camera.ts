import { type RefObject, useCallback, useEffect, useRef, useState } from 'react';
import { cylinderOfCode, openCodeReader } from './read-code.ts';

export type CameraState = 'off' | 'starting' | 'on' | 'insecure' | 'none' | 'refused' | 'other';

/** Between two looks at the picture: fast enough for a hand, slow enough for a phone. */
const LOOK_EVERY_MS = 150;

/** The camera behind a page, and what it sees. It is shut when the page is left. */
export function useCamera(video: RefObject<HTMLVideoElement | null>, onCylinder: (id: string) => void) {
  const [state, setState] = useState<CameraState>(startState);
  const stream = useRef<MediaStream | null>(null);
  const found = useRef(onCylinder);
  useEffect(() => {
    found.current = onCylinder;
  });
  const stop = useCallback(() => {
    for (const track of stream.current?.getTracks() ?? []) track.stop();
    stream.current = null;
  }, []);
  useEffect(() => stop, [stop]);

  const start = useCallback(async () => {
    setState('starting');
    try {
      const opened = await navigator.mediaDevices.getUserMedia({ video: { facingMode: { ideal: 'environment' } } });
      stream.current = opened;
      const look = await openCodeReader();
      const picture = video.current;
      if (!picture || stream.current !== opened) {
        for (const track of opened.getTracks()) track.stop();
        return;
      }
      picture.srcObject = opened;
      await picture.play();
      setState('on');
      while (stream.current === opened) {
        const text = await look(picture).catch(() => null);
        const cylinderId = text === null ? null : cylinderOfCode(text);
        if (cylinderId !== null && stream.current === opened) {
          stop();
          setState('off');
          found.current(cylinderId);
          return;
        }
        if (text !== null && stream.current === opened) setState('other');
        await new Promise((resolve) => setTimeout(resolve, LOOK_EVERY_MS));
      }
    } catch (error) {
      stop();
      const name = error instanceof DOMException ? error.name : '';
      setState(name === 'NotAllowedError' || name === 'SecurityError' ? 'refused' : 'none');
    }
  }, [video, stop]);
  return {
    state,
    start,
    stop: () => {
      stop();
      setState('off');
    },
  };
}

/** A browser gives the camera to a secure context only, and then hides that there is one. */
function startState(): CameraState {
  if (!globalThis.isSecureContext) return 'insecure';
  return navigator.mediaDevices && 'getUserMedia' in navigator.mediaDevices ? 'off' : 'none';
}
