import { useState } from 'react';
import { Button } from '../../components/ui/Button';
import { Sheet } from '../../components/ui/Sheet';
import { fullTime } from '../../drawings/times';
import { ApiError, withQuery } from '../../lib/api';
import { uploadFile } from '../../lib/upload';
import { PHOTO_TYPES } from '../../schemas/lists-and-limits';
import type { CasePage } from '../../schemas/api/cases';
import { paths } from '../../schemas/paths';
import type { CaseInHand } from './query';
import { photosSheet } from '../../words/cases';

interface Sending {
  ref: string;
  file: File;
  share: number;
  error: string | null;
}

/** Photos of a case: from the camera or the device, several at once, each kept once however often it is sent. */
export function PhotosSheet({ hand }: { hand: CaseInHand }) {
  const { page, take } = hand;
  const { id, timeZone } = page.case;
  const [sending, setSending] = useState<Sending[]>([]);
  const patch = (ref: string, some: Partial<Sending>) =>
    setSending((all) => all.map((s) => (s.ref === ref ? { ...s, ...some } : s)));

  const send = async (one: Sending): Promise<void> => {
    patch(one.ref, { error: null, share: 0 });
    try {
      const next = await uploadFile<CasePage>(
        withQuery(paths.api.casePhotos(id), {
          ref: one.ref,
          name: one.file.name || 'photo.jpg',
          at: new Date().toISOString(),
        }),
        one.file,
        (share) => patch(one.ref, { share }),
      );
      take(next);
      setSending((all) => all.filter((s) => s.ref !== one.ref));
    } catch (error) {
      patch(one.ref, { error: error instanceof ApiError ? error.message : photosSheet.itCouldNotBe });
    }
  };
  const add = async (files: File[]): Promise<void> => {
    const fresh = files.map((file) => ({ ref: crypto.randomUUID(), file, share: 0, error: null }));
    setSending((all) => [...all, ...fresh]);
    // one after the other: a roof has little network
    for (const one of fresh) await send(one);
  };
  return (
    <Sheet id="photos" title={photosSheet.photos} aside={photosSheet.countedPhotosPhoto(page.photos.length)}>
      {page.photos.length > 0 && (
        <ul className="mb-4 grid grid-cols-3 gap-2 sm:grid-cols-4">
          {page.photos.map((photo) => (
            <li key={photo.id}>
              <a href={paths.api.attachment(photo.id)} target="_blank" rel="noreferrer">
                <img
                  src={paths.api.attachmentThumbnail(photo.id)}
                  alt={`${photo.name}, ${photo.person}, ${fullTime(photo.at, timeZone)}`}
                  loading="lazy"
                  className="aspect-square w-full border border-rule object-cover"
                />
              </a>
            </li>
          ))}
        </ul>
      )}
      {sending.length > 0 && (
        <ul className="mb-3 divide-y divide-rule-faint border-y border-rule-faint" aria-live="polite">
          {sending.map((one) => (
            <li key={one.ref} className="flex flex-wrap items-center gap-2 py-2">
              <span className="min-w-0 flex-1 [overflow-wrap:anywhere]">
                {one.file.name}
                {one.error ? (
                  <span className="block text-sm text-rust-ink">{one.error}</span>
                ) : (
                  <progress
                    className="mt-1 block h-1 w-full accent-petrol"
                    value={one.share}
                    max={1}
                    aria-label={photosSheet.fileShareSent(one.file.name, one.share)}
                  />
                )}
              </span>
              {one.error && (
                <>
                  <Button onClick={() => void send(one)}>{photosSheet.sendAgain}</Button>
                  <Button onClick={() => setSending((all) => all.filter((s) => s.ref !== one.ref))}>
                    {photosSheet.leaveIt}
                  </Button>
                </>
              )}
            </li>
          ))}
        </ul>
      )}
      <div className="no-print flex flex-wrap gap-2">
        <PhotoButton label={photosSheet.takeAPhoto} camera onTaken={(files) => void add(files)} />
        <PhotoButton label={photosSheet.choosePhotos} onTaken={(files) => void add(files)} />
      </div>
    </Sheet>
  );
}

function PhotoButton({
  label,
  camera = false,
  onTaken,
}: {
  label: string;
  camera?: boolean;
  onTaken: (files: File[]) => void;
}) {
  return (
    <label className="target inline-flex cursor-pointer items-center justify-center rounded border border-rule bg-sheet px-4 text-[15px] font-medium text-ink focus-within:outline focus-within:outline-2 focus-within:outline-petrol hover:border-ink-3">
      {label}
      <input
        type="file"
        accept={PHOTO_TYPES}
        capture={camera ? 'environment' : undefined}
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
