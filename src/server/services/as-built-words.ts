import { AppError, type FieldFault } from '../errors';
import type { Hanging } from '../queries/as-built-records';
import { asBuiltRefusals, hangingParts, hangingRecords } from '../../words/refusals-as-built';

/** What the database says of a change that it refuses, in words, at the field. */
const CONSTRAINTS: Record<string, { key: string; message: string }> = {
  site_organisation_id_name_key: {
    key: 'name',
    message: asBuiltRefusals.siteNameTaken,
  },
  plane_site_id_name_key: { key: 'name', message: asBuiltRefusals.planeNameTaken },
  inverter_site_id_name_key: { key: 'name', message: asBuiltRefusals.inverterNameTaken },
  initiator_site_id_name_key: { key: 'name', message: asBuiltRefusals.initiatorNameTaken },
  zone_site_id_name_key: { key: 'name', message: asBuiltRefusals.zoneNameTaken },
  transmitter_site_id_name_key: { key: 'name', message: asBuiltRefusals.transmitterNameTaken },
  string_site_id_name_key: { key: 'name', message: asBuiltRefusals.stringNameTaken },
  logger_serial_key: {
    key: 'serial',
    message: asBuiltRefusals.loggerOnRecord,
  },
  sensor_logger_id_number_key: { key: 'number', message: asBuiltRefusals.sensorNumberTaken },
  placement_one_place_at_a_time: {
    key: 'changes',
    message: asBuiltRefusals.serialPlacedElsewhere,
  },
  placement_one_unit_at_a_time: {
    key: 'changes',
    message: asBuiltRefusals.slotFilled,
  },
  string_monitored_has_logger: { key: 'logger', message: asBuiltRefusals.chooseLogger },
  string_shutdown_only_names_transmitters: {
    key: 'transmitters',
    message: asBuiltRefusals.chooseTransmitter,
  },
};

const DETAIL = (error: unknown): { code?: string; constraint?: string; table?: string } =>
  typeof error === 'object' && error !== null ? error : {};

/**
 * Runs what writes; what the database refuses becomes a fault at its field.
 * @throws AppError conflict (a name is taken, something else hangs on it) · invalid
 */
export async function inWords<T>(prefix: string, work: () => Promise<T>): Promise<T> {
  try {
    return await work();
  } catch (error) {
    const { code, constraint, table } = DETAIL(error);
    const known = constraint === undefined ? undefined : CONSTRAINTS[constraint];
    if (known)
      throw new AppError(code === '23505' || code === '23P01' ? 'conflict' : 'invalid', {
        message: known.message,
        fields: [{ field: `${prefix}${known.key}`, message: known.message }],
      });
    if (code === '23503')
      throw new AppError('conflict', {
        message: asBuiltRefusals.recordsHang(table ? table.replaceAll('_', ' ') : ''),
      });
    throw error;
  }
}

export function refuseFaults(faults: readonly FieldFault[]): void {
  if (faults.length > 0)
    throw new AppError('invalid', { message: faults.map((f) => f.message).join(' '), fields: [...faults] });
}

/** Why a part can't go, and what to do; null: it can. */
export function hangingWords(part: string, { parts, records }: Hanging): string | null {
  if (records.length > 0)
    return asBuiltRefusals.partStays(
      part,
      records.map((r) => hangingRecords[r.what](r.count)),
      records.length === 1 && records[0]?.count === 1,
    );
  if (parts.length > 0)
    return asBuiltRefusals.partInUse(
      part,
      parts.map((p) => hangingParts[p.what](p.names)),
    );
  return null;
}
