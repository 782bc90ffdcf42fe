import { useState } from 'react';
import { Dialog } from '../../components/ui/Dialog';
import { SiteTime } from '../../components/ui/Time';
import { ApiError, withQuery } from '../../lib/api';
import { newRef } from '../../lib/capture-records';
import { uploadFile } from '../../lib/upload';
import type { AttachmentItem, AttachmentQuery } from '../../schemas/api/attachments';
import { PHOTO_MAX_BYTES, PHOTO_TYPES } from '../../schemas/lists-and-limits';
import { paths } from '../../schemas/paths';
import { checksPhotos } from '../../words/checks';

interface Props {
  photos: readonly AttachmentItem[];
  /** What the photos show, for who can't see them. */
  of: string;
  now: string;
  timeZone: string;
}

/** Small pictures; a click shows one large. */
export function Photos({ photos, of, now, timeZone }: Props) {
  const [shown, setShown] = useState<number | null>(null);
  const photo = shown === null ? undefined : photos[shown];
  if (photos.length === 0) return null;
  return (
    <>
      <ul className="mt-2 flex flex-wrap gap-2">
        {photos.map((p, i) => (
          <li key={p.ref}>
            <button
              type="button"
              onClick={() => setShown(i)}
              className="block h-[72px] w-[96px] overflow-hidden rounded border border-rule"
            >
              <img
                src={paths.api.attachmentThumbnail(p.ref)}
                alt={`${of}: ${p.name}`}
                loading="lazy"
                className="h-full w-full object-cover"
              />
            </button>
          </li>
        ))}
      </ul>
      <Dialog open={photo !== undefined} title={photo?.name ?? ''} onClose={() => setShown(null)}>
        {photo && (
          <figure>
            <img
              src={paths.api.attachment(photo.ref)}
              alt={`${of}: ${photo.name}`}
              width={photo.width ?? undefined}
              height={photo.height ?? undefined}
              className="h-auto max-h-[70vh] w-full bg-film object-contain"
            />
            <figcaption className="mt-2 text-sm text-ink-2">
              {of}. {photo.person}, <SiteTime at={photo.at} now={now} timeZone={timeZone} />.
              {photo.note ? ` ${photo.note}` : ''}
              {photo.placeKept ? checksPhotos.thePictureCarriesIts : ''}
            </figcaption>
            {photos.length > 1 && (
              <div className="mt-3 flex justify-between">
                {[-1, 1].map((step) => (
                  <button
                    key={step}
                    type="button"
                    className="target rounded border border-rule px-4"
                    onClick={() => setShown(((shown ?? 0) + step + photos.length) % photos.length)}
                  >
                    {step < 0 ? checksPhotos.previousPhoto : checksPhotos.nextPhoto}
                  </button>
                ))}
              </div>
            )}
          </figure>
        )}
      </Dialog>
    </>
  );
}

interface AddProps {
  site: string;
  string: string;
  subject: AttachmentQuery['subject'];
  subjectRef: string;
  label: string;
  /** What the camera wrote about place and time stays in the picture. */
  keepPlace: boolean;
  onStored: () => Promise<unknown>;
}
interface Sending {
  ref: string;
  file: File;
  share: number;
  fault: string | null;
}

/** Adds photos, several at once, each with its own progress; one that breaks off is sent again as the same. */
export function AddPhotos({ site, string, subject, subjectRef, label, keepPlace, onStored }: AddProps) {
  const [sending, setSending] = useState<readonly Sending[]>([]);
  const patch = (ref: string, some: Partial<Sending>) =>
    setSending((all) => all.map((s) => (s.ref === ref ? { ...s, ...some } : s)));

  const send = async (one: Sending) => {
    if (one.file.size > PHOTO_MAX_BYTES) {
      const limit = Math.round(PHOTO_MAX_BYTES / 1024 / 1024);
      patch(one.ref, { fault: checksPhotos.itIsLargerThan(limit) });
      return;
    }
    patch(one.ref, { fault: null, share: 0 });
    const query: Record<string, string> = {
      ref: one.ref,
      subject,
      subjectRef,
      string,
      name: one.file.name.slice(0, 200) || checksPhotos.photo,
      at: new Date(Math.min(one.file.lastModified || Date.now(), Date.now())).toISOString(),
      keepPlace: keepPlace ? 'yes' : 'no',
    };
    try {
      const path = withQuery(paths.api.attachments(site), query);
      await uploadFile<AttachmentItem>(path, one.file, (share) => patch(one.ref, { share }));
      setSending((all) => all.filter((s) => s.ref !== one.ref));
      await onStored();
    } catch (error) {
      patch(one.ref, { fault: error instanceof ApiError ? error.message : String(error) });
    }
  };
  return (
    <div>
      <div>
        <label className="target inline-flex cursor-pointer items-center rounded border border-rule px-3 text-[15px] focus-within:outline focus-within:outline-2 focus-within:outline-petrol hover:border-ink-3">
          {label}
          <input
            type="file"
            multiple
            accept={PHOTO_TYPES}
            className="sr-only"
            onChange={(event) => {
              const added = [...(event.target.files ?? [])].map((file) => ({
                ref: newRef(),
                file,
                share: 0,
                fault: null,
              }));
              event.target.value = '';
              setSending((all) => [...all, ...added]);
              for (const one of added) void send(one);
            }}
          />
        </label>
      </div>
      {sending.length > 0 && (
        <ul className="mt-2 space-y-1 text-sm">
          {sending.map((s) => (
            <li key={s.ref} className="flex flex-wrap items-center gap-x-3 gap-y-1">
              <span className="min-w-0 truncate">{s.file.name}</span>
              {s.fault === null ? (
                <progress
                  value={s.share}
                  max={1}
                  aria-label={checksPhotos.fileSent(s.file.name)}
                  className="h-2 w-[120px]"
                />
              ) : (
                <>
                  <span role="alert" className="text-rust-ink">
                    {s.fault}
                  </span>
                  <button type="button" className="target px-2 underline" onClick={() => void send(s)}>
                    {checksPhotos.sendAgain}
                  </button>
                  <button
                    type="button"
                    className="target px-2 underline"
                    onClick={() => setSending((all) => all.filter((x) => x.ref !== s.ref))}
                  >
                    {checksPhotos.leaveItOut}
                  </button>
                </>
              )}
            </li>
          ))}
        </ul>
      )}
    </div>
  );
}
