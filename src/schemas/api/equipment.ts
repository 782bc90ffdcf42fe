import { z } from 'zod';
import { EQUIPMENT_FAMILIES } from '../../domain/equipment/families';
import { id } from './now';
import { equipmentFields } from '../../words/fields';

const time = z.iso.datetime();

export const familyParams = z.object({ family: z.enum(EQUIPMENT_FAMILIES) });
export const typeParams = z.object({ family: z.enum(EQUIPMENT_FAMILIES), type: id });
export const pairParams = z.object({ pair: id });

/** A document that a pair rests on: its bytes are the body. */
export const evidenceQuery = z.strictObject({
  ref: id, // made by the browser: sent again after a broken upload is stored once
  name: z.string().trim().min(1, equipmentFields.nameFile).max(200, equipmentFields.nameTooLong),
});

export const ARCHIVED_SHOWS = ['in_use', 'all', 'archived'] as const;

/** What a list of the catalogue shows, as it stands in the address. What an old link gets wrong falls back. */
export const equipmentView = z.object({
  q: z.string().trim().max(80).catch(''),
  show: z.enum(ARCHIVED_SHOWS).catch('in_use'),
  sort: z.string().max(40).catch('name'),
  order: z.enum(['down', 'up']).catch('up'),
});
export type EquipmentView = z.infer<typeof equipmentView>;

/** The same for a download, where a wrong word is refused and not guessed at. */
export const equipmentCsvQuery = z.strictObject({
  q: z.string().trim().max(80).default(''),
  show: z.enum(ARCHIVED_SHOWS).default('in_use'),
  sort: z.string().max(40).default('name'),
  order: z.enum(['down', 'up']).default('up'),
});

export const entry = z.record(z.string(), z.union([z.string(), z.number(), z.null()]));

export const catalogueItem = z.object({
  id,
  entry,
  archivedAt: time.nullable(),
  version: z.string(),
  strings: z.int(),
  sites: z.int(),
  /** Module and unit types that name it: connectors only. */
  types: z.int(),
});
export type CatalogueItem = z.infer<typeof catalogueItem>;

export const connectorItem = z.object({
  id,
  name: z.string(),
  maker: z.string(),
  family: z.string(),
  archived: z.boolean(),
});
export type ConnectorItem = z.infer<typeof connectorItem>;

export const pairItem = z.object({
  id,
  first: z.object({ id, name: z.string() }),
  second: z.object({ id, name: z.string() }),
  evidence: z.string(),
  recordedBy: z.string(),
  recordedAt: time,
  endedAt: time.nullable(),
  files: z.array(z.object({ id, name: z.string() })),
});
export type PairItem = z.infer<typeof pairItem>;

export const catalogue = z.object({
  family: z.enum(EQUIPMENT_FAMILIES),
  items: z.array(catalogueItem),
  connectors: z.array(connectorItem),
  pairs: z.array(pairItem),
});
export type Catalogue = z.infer<typeof catalogue>;

/** A type as one person sees it: with who changed it last. */
export const catalogueType = z.object({
  item: catalogueItem,
  changedBy: z.string().nullable(),
  changedAt: time.nullable(),
});
export type CatalogueType = z.infer<typeof catalogueType>;

/** A form as it was typed. */
export const entryInput = z.strictObject({
  typed: z.record(z.string().max(40), z.string().max(400)),
  /** Keys of the doubts that a person has accepted. */
  accepted: z.array(z.string().max(40)).max(40).default([]),
});
export type EntryInput = z.infer<typeof entryInput>;
export const entryChange = entryInput.extend({
  /** Of the entry as the form was opened. */
  version: z.string().max(64),
});
export type EntryChange = z.infer<typeof entryChange>;
export const entrySaved = z.object({ id, version: z.string() });
export type EntrySaved = z.infer<typeof entrySaved>;

export const archiveInput = z.strictObject({ archived: z.boolean() });

export const importInput = z.strictObject({
  text: z.string().min(1, equipmentFields.chooseFile).max(220_000, equipmentFields.fileTooLarge),
  /** Given: import what the preview with this fingerprint showed. */
  confirm: z.string().max(80).optional(),
});

export const importFault = z.object({
  column: z.string(),
  typed: z.string(),
  why: z.string(),
  remedy: z.string(),
});
export type ImportFault = z.infer<typeof importFault>;
export const IMPORT_OUTCOMES = ['new', 'changed', 'unchanged', 'faulty'] as const;
export const importRow = z.object({
  /** Row of the file; the header is row 1. */
  row: z.int(),
  name: z.string(),
  outcome: z.enum(IMPORT_OUTCOMES),
  changes: z.array(z.object({ label: z.string(), before: z.string(), after: z.string() })),
  faults: z.array(importFault),
  /** Unusual, but importable. */
  doubts: z.array(z.string()),
  /** Strings that rest on the type that would change. */
  strings: z.int(),
});
export type ImportRow = z.infer<typeof importRow>;
export const importPreview = z.object({
  rows: z.array(importRow),
  /** What is wrong with the file as a whole. */
  headerFaults: z.array(importFault),
  ignoredColumns: z.array(z.string()),
  counts: z.object({ new: z.int(), changed: z.int(), unchanged: z.int(), faulty: z.int() }),
  fingerprint: z.string(),
  /** Whether it was imported, or only looked at. */
  imported: z.boolean(),
});
export type ImportPreview = z.infer<typeof importPreview>;

export const pairInput = z.strictObject({
  first: id,
  second: id,
  document: z.string().trim().min(3, equipmentFields.nameDocument).max(300),
  edition: z.string().trim().min(1, equipmentFields.sayEdition).max(80),
  page: z.string().trim().min(1, equipmentFields.sayPage).max(80),
  note: z.string().trim().max(1000).default(''),
});
export type PairInput = z.infer<typeof pairInput>;
