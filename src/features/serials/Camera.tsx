import { useEffect, useRef, useState } from 'react';
import { Button } from '../../components/ui/Button';
import { cameraHindrance, openDecoder, type Decoder } from '../../lib/barcode';
import { camera } from '../../words/serials';

interface Props {
  onCode: (text: string) => void;
  onClose: () => void;
}
const EVERY_MS = 180;
/** The same code in sight is not read again for so long. */
const SAME_MS = 2500;
const WIDTH = 720;

const words = (error: unknown): string => {
  const name = error instanceof DOMException ? error.name : '';
  if (name === 'NotAllowedError') return camera.theCameraWasRefused;
  if (name === 'NotFoundError' || name === 'OverconstrainedError') return camera.noCameraWasFound;
  if (name === 'NotReadableError') return camera.anotherProgramHasThe;
  return camera.theCameraCouldNot(error instanceof Error ? error.message : String(error));
};

/** The camera's picture, looked through for codes a few times a second. */
export function Camera({ onCode, onClose }: Props) {
  const video = useRef<HTMLVideoElement>(null);
  const onCodeNow = useRef(onCode);
  const [fault, setFault] = useState<string | null>(null);
  const [reader, setReader] = useState<Decoder['by'] | null>(null);
  const [torch, setTorch] = useState<{ on: boolean; set: (on: boolean) => void } | null>(null);
  useEffect(() => {
    onCodeNow.current = onCode;
  }, [onCode]);

  useEffect(() => {
    let stopped = false;
    let stream: MediaStream | null = null;
    let timer: ReturnType<typeof setTimeout> | undefined;
    const seen = { text: '', at: 0 };
    const canvas = document.createElement('canvas');
    const look = async (decoder: Decoder) => {
      const picture = video.current;
      if (picture && picture.readyState >= picture.HAVE_CURRENT_DATA && picture.videoWidth > 0) {
        // the middle band, where the frame is drawn: labels lie close to each other
        const { videoWidth: w, videoHeight: h } = picture;
        const [cropW, cropH] = [w * 0.9, h * 0.6];
        const scale = Math.min(1, WIDTH / cropW);
        canvas.width = Math.round(cropW * scale);
        canvas.height = Math.round(cropH * scale);
        const pen = canvas.getContext('2d', { willReadFrequently: true });
        pen?.drawImage(
          picture,
          (w - cropW) / 2,
          (h - cropH) / 2,
          cropW,
          cropH,
          0,
          0,
          canvas.width,
          canvas.height,
        );
        const image = pen?.getImageData(0, 0, canvas.width, canvas.height);
        const text = image ? await decoder.read(image) : null;
        const now = performance.now();
        if (text !== null && !stopped && !(text === seen.text && now - seen.at < SAME_MS)) {
          seen.text = text;
          onCodeNow.current(text);
        }
        if (text !== null) seen.at = now;
      }
      if (!stopped) timer = setTimeout(() => void look(decoder).catch(failed), EVERY_MS);
    };
    const failed = (error: unknown) => {
      if (!stopped) setFault(words(error));
    };
    const start = async () => {
      const hindrance = cameraHindrance();
      if (hindrance) throw new Error(hindrance);
      stream = await navigator.mediaDevices.getUserMedia({
        audio: false,
        video: { facingMode: { ideal: 'environment' }, width: { ideal: 1280 }, height: { ideal: 720 } },
      });
      if (stopped) return stop();
      const [track] = stream.getVideoTracks();
      const can = track?.getCapabilities() as { torch?: boolean } | undefined;
      if (track && can?.torch) {
        const set = (on: boolean) => {
          void track
            .applyConstraints({ advanced: [{ torch: on } as MediaTrackConstraintSet] })
            .then(() => setTorch({ on, set }), failed);
        };
        setTorch({ on: false, set });
      }
      if (video.current) {
        video.current.srcObject = stream;
        await video.current.play();
      }
      const decoder = await openDecoder();
      setReader(decoder.by);
      await look(decoder);
    };
    const stop = () => stream?.getTracks().forEach((t) => t.stop());
    start().catch((error: unknown) => {
      if (!stopped) setFault(cameraHindrance() ?? words(error));
    });
    return () => {
      stopped = true;
      clearTimeout(timer);
      stop();
    };
  }, []);

  return (
    <div className="border border-rule bg-sheet">
      {fault ? (
        <p role="alert" className="p-3 text-[15px] text-rust-ink">
          {fault}
        </p>
      ) : (
        <div className="relative bg-ink">
          <video
            ref={video}
            muted
            playsInline
            className="block max-h-[42vh] w-full object-cover"
            aria-label={camera.camera}
          />
          <span
            aria-hidden="true"
            className="pointer-events-none absolute inset-x-[5%] inset-y-[20%] border-2 border-[#fff]"
          />
        </div>
      )}
      <div className="flex flex-wrap items-center justify-between gap-2 p-2">
        <p className="px-1 text-sm text-ink-2" role="status">
          {fault ? '' : reader === null ? camera.gettingReady : camera.holdTheBarCode}
        </p>
        <span className="flex gap-2">
          {torch && (
            <Button aria-pressed={torch.on} onClick={() => torch.set(!torch.on)}>
              {camera.lightOn(torch.on)}
            </Button>
          )}
          <Button onClick={onClose}>{camera.closeTheCamera}</Button>
        </span>
      </div>
    </div>
  );
}
