import { useEffect, useId, useState } from 'react';
import type { CapturePhone } from '../../lib/capture-phone';
import type { Waiting } from '../../lib/capture-queue';
import { percent } from '../../drawings/numbers';
import { PHOTO_TYPES } from '../../schemas/lists-and-limits';
import { capturePhotos } from '../../words/capture';

interface ButtonProps {
  label: string;
  /** Given the pictures that were taken, in order. */
  onTaken: (files: File[]) => void;
  className?: string;
}

/** Opens the camera; where there is none, the pictures of the device. */
export function PhotoButton({ label, onTaken, className = '' }: ButtonProps) {
  const id = useId();
  return (
    <label
      htmlFor={id}
      className={`inline-flex min-h-[52px] cursor-pointer items-center justify-center rounded border border-rule bg-sheet px-4 text-[15px] font-medium text-ink focus-within:outline focus-within:outline-2 focus-within:outline-petrol ${className}`}
    >
      {label}
      <input
        id={id}
        type="file"
        accept={PHOTO_TYPES}
        capture="environment"
        multiple
        className="sr-only"
        onChange={(event) => {
          const files = [...(event.target.files ?? [])];
          event.target.value = '';
          if (files.length > 0) onTaken(files);
        }}
      />
    </label>
  );
}

interface ListProps {
  phone: CapturePhone | null;
  photos: readonly Waiting[];
  progress: Readonly<Record<string, number>>;
}

/** Photos that wait or are on their way, small. */
export function WaitingPhotos({ phone, photos, progress }: ListProps) {
  if (photos.length === 0) return null;
  return (
    <div>
      <p className="mb-1 text-sm text-ink-2">{capturePhotos.onThisPhoneWaiting(photos.length)}</p>
      <ul className="flex flex-wrap gap-2">
        {photos.map((photo) => (
          <li key={photo.ref}>
            <Thumbnail phone={phone} photo={photo} share={progress[photo.ref]} />
          </li>
        ))}
      </ul>
    </div>
  );
}

export function Thumbnail({
  phone,
  photo,
  share,
}: {
  phone: CapturePhone | null;
  photo: Waiting;
  share?: number;
}) {
  const [url, setUrl] = useState<string | null>(null);
  useEffect(() => {
    let made: string | null = null;
    let gone = false;
    phone?.photo(photo.ref).then(
      (kept) => {
        if (!kept || gone) return;
        made = URL.createObjectURL(new Blob([kept.bytes], { type: kept.type }));
        setUrl(made);
      },
      () => undefined, // without its picture the record is shown by its words
    );
    return () => {
      gone = true;
      if (made) URL.revokeObjectURL(made);
    };
  }, [phone, photo.ref]);
  return (
    <figure className="w-[72px]">
      {url ? (
        <img src={url} alt={photo.label} className="h-[72px] w-[72px] border border-rule object-cover" />
      ) : (
        <div className="hatched h-[72px] w-[72px] border border-rule" role="img" aria-label={photo.label} />
      )}
      {share !== undefined && (
        <figcaption className="text-xs text-ink-2">
          <progress
            className="block h-1 w-full accent-petrol"
            value={share}
            max={1}
            aria-label={capturePhotos.sentOfIt}
          />
          {percent(share)}
        </figcaption>
      )}
    </figure>
  );
}
