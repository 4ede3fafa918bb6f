import { type RefObject, useEffect, useEffectEvent, useState } from 'react';
import type { CameraState } from './run-camera.ts';

type Torch = (on: boolean) => Promise<void>;

export interface Camera {
  state: CameraState;
  torch: { lit: boolean; toggle: () => void } | undefined;
  retry: () => void;
}

/** Reads codes while the page is in sight; the camera is let go when it is not. */
export function useCamera(video: RefObject<HTMLVideoElement | null>, onText: (text: string) => void): Camera {
  const [state, setState] = useState<CameraState>('asking');
  const [torch, setTorch] = useState<{ light: Torch }>();
  const [lit, setLit] = useState(false);
  const [attempt, setAttempt] = useState(0);
  const told = useEffectEvent(onText);
  const visible = useVisible();
  useEffect(() => {
    if (!visible) return undefined;
    let ended = false;
    let stop: (() => void) | undefined;
    // Loaded on its own: the code box works before any of this has arrived.
    import('./run-camera.ts').then(
      ({ runCamera }) => {
        if (ended || video.current === null) return;
        stop = runCamera(video.current, {
          onState: setState,
          onTorch: (light) => setTorch(light === undefined ? undefined : { light }),
          onText: (text) => told(text),
        });
      },
      () => setState('no-reader'),
    );
    return () => {
      ended = true;
      stop?.();
      setTorch(undefined);
      setLit(false);
    };
  }, [visible, attempt, video]);
  return {
    state,
    torch:
      torch === undefined
        ? undefined
        : {
            lit,
            toggle: () =>
              void torch.light(!lit).then(
                () => setLit(!lit),
                () => setTorch(undefined),
              ),
          },
    retry: () => setAttempt(attempt + 1),
  };
}

function useVisible(): boolean {
  const [visible, setVisible] = useState(document.visibilityState === 'visible');
  useEffect(() => {
    const change = () => setVisible(document.visibilityState === 'visible');
    document.addEventListener('visibilitychange', change);
    return () => document.removeEventListener('visibilitychange', change);
  }, []);
  return visible;
}
