import { z } from 'zod';
import { id } from './now';
import { attachmentFields } from '../../words/fields';

/** Photos and documents. The bytes are the body of the request, what they are is its query. */

export const ATTACHMENT_SUBJECTS = [
  'install_check',
  'meter_reading',
  'shutdown_test',
  'string',
  'site',
  'case',
  'connector_pair',
] as const;

/** What a camera's picture is stored as: JPEG, its longer side at most this many pixels. */
export const PHOTO_MAX_PIXELS = 2560;
export const THUMBNAIL_PIXELS = 320;

export const attachmentQuery = z.strictObject({
  ref: id, // made where the photo was taken: sent again after a broken upload is stored once
  subject: z.enum(ATTACHMENT_SUBJECTS),
  subjectRef: id.optional(), // may arrive before its subject
  string: id.optional(),
  name: z.string().trim().min(1, attachmentFields.nameFile).max(200, attachmentFields.nameTooLong),
  note: z.string().trim().max(2000, attachmentFields.noteTooLong).default(''),
  at: z.iso.datetime(attachmentFields.giveTimeUtc),
  /** `yes`: what the camera wrote about place and time stays in the picture. */
  keepPlace: z.enum(['yes', 'no']).default('no'),
});
export type AttachmentQuery = z.infer<typeof attachmentQuery>;

export const attachmentItem = z.object({
  ref: id,
  subject: z.string(),
  subjectRef: id.nullable(),
  /** Of an install check: which one; also when a newer record has taken the place of that one. */
  check: z.string().nullable(),
  stringId: id.nullable(),
  name: z.string(),
  mediaType: z.string(),
  byteSize: z.int(),
  width: z.int().nullable(),
  height: z.int().nullable(),
  note: z.string(),
  placeKept: z.boolean(),
  person: z.string(),
  at: z.iso.datetime(),
  recordedAt: z.iso.datetime(),
});
export type AttachmentItem = z.infer<typeof attachmentItem>;

export const attachmentParams = z.strictObject({ attachment: id });
export const attachmentView = z.strictObject({ variant: z.enum(['full', 'thumbnail']).default('full') });
