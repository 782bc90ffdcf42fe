/** A short tone and a short tremble, for gloves and glare; both are off until somebody asks for them. */

/** 120 ms, high for kept, low for a clash. */
export function beep(kept: boolean): void {
  const context = new AudioContext();
  const tone = context.createOscillator();
  const volume = context.createGain();
  tone.frequency.value = kept ? 1320 : 330;
  volume.gain.value = 0.12;
  tone.connect(volume).connect(context.destination);
  tone.start();
  tone.stop(context.currentTime + 0.12);
  tone.addEventListener('ended', () => void context.close());
}

export function tremble(kept: boolean): void {
  // not every browser has it; there it stays quiet
  if ('vibrate' in navigator) navigator.vibrate(kept ? 60 : [80, 60, 80]);
}
