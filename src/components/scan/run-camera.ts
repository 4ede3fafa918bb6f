import { makeCodeDetector } from './code-detector.ts';
import { type Refusal, closeCamera, openCamera } from './open-camera.ts';
import { readCodes } from './read-codes.ts';
import { findTorch } from './torch.ts';

export type CameraState = 'asking' | 'reading' | 'no-reader' | Refusal;

export interface CameraEvents {
  onState: (state: CameraState) => void;
  onTorch: (torch: ((on: boolean) => Promise<void>) | undefined) => void;
  onText: (text: string) => void;
}

/** Camera into `video`, codes out of it; returns how to let go of the camera. */
export function runCamera(video: HTMLVideoElement, events: CameraEvents): () => void {
  let stopped = false;
  const undo: (() => void)[] = [];
  const run = async () => {
    events.onState('asking');
    const opened = await openCamera();
    if ('refusal' in opened) return tell(opened.refusal);
    undo.push(() => closeCamera(opened.stream));
    if (stopped) return stop();
    video.srcObject = opened.stream;
    events.onTorch(findTorch(opened.stream));
    await video.play();
    const detect = await makeCodeDetector().catch(() => undefined);
    if (stopped) return;
    if (detect === undefined) return tell('no-reader');
    undo.push(readCodes(video, detect, events.onText));
    tell('reading');
  };
  const tell = (state: CameraState) => {
    if (!stopped) events.onState(state);
  };
  const stop = () => {
    stopped = true;
    for (const step of undo.splice(0)) step();
  };
  run().catch(() => tell('failed'));
  return stop;
}
