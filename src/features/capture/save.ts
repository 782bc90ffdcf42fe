import { newRef } from '../../lib/capture-records';
import type { CapturePhone } from '../../lib/capture-phone';
import type { KeptPhoto, NewRecord } from '../../lib/capture-store';
import type { CaptureSnapshot, CaptureString } from '../../schemas/api/capture';
import { quantity } from '../../drawings/numbers';
import { photoRecord, type PhotoSubject } from './records';
import { captureSave } from '../../words/capture';

export const sizeWords = (bytes: number): string =>
  bytes < 1e6 ? quantity(bytes / 1e3, 'kB') : quantity(bytes / 1e6, 'MB', 1);

interface Taken {
  phone: CapturePhone;
  snapshot: CaptureSnapshot;
  string: CaptureString;
  subject: PhotoSubject;
  subjectRef: string;
  /** What they show, in words. */
  of: string;
}

/** Keeps pictures on the phone as records. Returns what was not kept and why; null: all of them were. */
export async function keepPhotos(files: readonly File[], taken: Taken): Promise<string | null> {
  const { phone, snapshot, string, subject, subjectRef, of } = taken;
  const most = snapshot.limits.photoMaxBytes;
  const tooLarge = files.filter((file) => file.size > most);
  const records: NewRecord[] = [];
  const photos = new Map<string, KeptPhoto>();
  for (const file of files) {
    if (file.size > most || file.size === 0) continue;
    const made = { snapshot, string, ref: newRef(), at: new Date().toISOString() };
    const bytes = await file.arrayBuffer();
    const { record, photo } = photoRecord(
      made,
      { name: file.name, type: file.type, bytes },
      subject,
      subjectRef,
      of,
    );
    records.push(record);
    photos.set(photo.ref, photo);
  }
  if (records.length > 0) await phone.add(records, photos);
  const empty = files.filter((file) => file.size === 0).length;
  const faults = [
    ...tooLarge.map((file) => captureSave.hasAtMostCan(file.name, sizeWords(file.size), sizeWords(most))),
    ...(empty > 0 ? [captureSave.heldNothingTakeThe(empty)] : []),
  ];
  return faults.length > 0 ? faults.join(' ') : null;
}
