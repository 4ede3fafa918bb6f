/** Switches the lamp beside the lens; undefined where the track has none. */
export function findTorch(stream: MediaStream): ((on: boolean) => Promise<void>) | undefined {
  const track = stream.getVideoTracks()[0];
  // Some browsers have no getCapabilities, and the type library does not know the lamp.
  const able = track?.getCapabilities?.() as { torch?: boolean } | undefined;
  if (track === undefined || able?.torch !== true) return undefined;
  return (on) => track.applyConstraints({ advanced: [{ torch: on } as MediaTrackConstraintSet] });
}
