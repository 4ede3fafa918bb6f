type TorchTrack = MediaStreamTrack & { getCapabilities?: () => MediaTrackCapabilities & { torch?: boolean } };

/** Switches the lamp beside the lens; undefined where the track has none. */
export function findTorch(stream: MediaStream): ((on: boolean) => Promise<void>) | undefined {
  const track = stream.getVideoTracks()[0] as TorchTrack | undefined;
  if (track?.getCapabilities?.().torch !== true) return undefined;
  return (on) => track.applyConstraints({ advanced: [{ torch: on } as MediaTrackConstraintSet] });
}
