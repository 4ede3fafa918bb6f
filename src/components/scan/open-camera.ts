/** Why there is no picture. */
export type Refusal = 'insecure' | 'denied' | 'none' | 'failed';

const WANTED: MediaStreamConstraints = {
  audio: false,
  video: { facingMode: { ideal: 'environment' }, width: { ideal: 1280 }, height: { ideal: 1280 } },
};

/** Asks for the camera at the back. */
export async function openCamera(): Promise<{ stream: MediaStream } | { refusal: Refusal }> {
  // Browsers hide the camera from pages that did not come over https.
  if (!('mediaDevices' in navigator)) return { refusal: 'insecure' };
  try {
    return { stream: await navigator.mediaDevices.getUserMedia(WANTED) };
  } catch (error) {
    const name = error instanceof DOMException ? error.name : '';
    if (name === 'NotAllowedError' || name === 'SecurityError') return { refusal: 'denied' };
    if (name === 'NotFoundError' || name === 'OverconstrainedError') return { refusal: 'none' };
    return { refusal: 'failed' };
  }
}

export function closeCamera(stream: MediaStream): void {
  for (const track of stream.getTracks()) track.stop();
}
