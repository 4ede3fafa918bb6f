import { useRef } from 'react';
import type { CameraState } from './run-camera.ts';
import { useCamera } from './use-camera.ts';

const WORDS: Record<CameraState, { glyph: string; text: string }> = {
  asking: { glyph: 'g-clock', text: 'Opening the camera. Allow it.' },
  reading: { glyph: 'g-scan', text: 'Hold the code in the square.' },
  denied: { glyph: 'g-off', text: 'No camera. Type the code below.' },
  none: { glyph: 'g-off', text: 'No camera here. Type the code below.' },
  insecure: { glyph: 'g-off', text: 'The camera needs https. Type the code below.' },
  failed: { glyph: 'g-warn', text: 'The camera stopped. Type the code below.' },
  'no-reader': { glyph: 'g-off', text: 'No code reader offline yet. Type the code.' },
};

/** The camera's square, what it is doing in words, and its lamp where it has one. */
export function CameraView({ onText }: { onText: (text: string) => void }) {
  const video = useRef<HTMLVideoElement>(null);
  const camera = useCamera(video, onText);
  const { glyph, text } = WORDS[camera.state];
  const seen = camera.state === 'reading' || camera.state === 'no-reader';
  const stuck = !seen && camera.state !== 'asking' && camera.state !== 'insecure';
  return (
    <section className="stack" aria-label="Camera">
      <div className="viewfinder" data-seen={seen}>
        <video ref={video} muted playsInline aria-label="Camera picture" />
        {seen ? <span className="aim" /> : <span className={`g ${glyph}`} aria-hidden="true" />}
      </div>
      <div className="viewfinder-foot">
        <p className={`g ${glyph}`} role="status" data-camera={camera.state}>
          {text}
        </p>
        {camera.torch === undefined ? null : (
          <button type="button" className="key" aria-pressed={camera.torch.lit} onClick={camera.torch.toggle}>
            Light
          </button>
        )}
        {stuck ? (
          <button type="button" className="key" onClick={camera.retry}>
            Try again
          </button>
        ) : null}
      </div>
    </section>
  );
}
