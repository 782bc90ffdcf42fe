import { AppError, type FieldFault } from '../errors';
import type { Hanging } from '../queries/as-built-records';

/** What the database says of a change that it refuses, in words, at the field. */
const CONSTRAINTS: Record<string, { key: string; message: string }> = {
  site_organisation_id_name_key: {
    key: 'name',
    message: 'Another site of yours has this name. Choose one that tells them apart.',
  },
  plane_site_id_name_key: { key: 'name', message: 'Another plane here has this name.' },
  inverter_site_id_name_key: { key: 'name', message: 'Another inverter here has this name.' },
  initiator_site_id_name_key: { key: 'name', message: 'Another initiator here has this name.' },
  zone_site_id_name_key: { key: 'name', message: 'Another zone here has this name.' },
  transmitter_site_id_name_key: { key: 'name', message: 'Another transmitter here has this name.' },
  string_site_id_name_key: { key: 'name', message: 'Another string here has this name.' },
  logger_serial_key: {
    key: 'serial',
    message:
      'A logger with this serial is on record already. Look at the label; if it is right, ask whoever runs this installation.',
  },
  sensor_logger_id_number_key: { key: 'number', message: 'This logger has a sensor with this number.' },
  placement_one_place_at_a_time: {
    key: 'changes',
    message: 'One of these serials was placed elsewhere at this moment. Nothing was changed; look again.',
  },
  placement_one_unit_at_a_time: {
    key: 'changes',
    message: 'One of these slots was filled at this moment. Nothing was changed; look again.',
  },
  string_monitored_has_logger: { key: 'logger', message: 'Units that report need a logger. Choose one.' },
  string_shutdown_only_names_transmitters: {
    key: 'transmitters',
    message: 'Shutdown-only units need a transmitter. Choose at least one that the string hears.',
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
        message: `Records hang on this, or somebody changed it at this moment${table ? ` (${table.replaceAll('_', ' ')})` : ''}. Reload the page and look again.`,
      });
    throw error;
  }
}

export function refuseFaults(faults: readonly FieldFault[]): void {
  if (faults.length > 0)
    throw new AppError('invalid', { message: faults.map((f) => f.message).join(' '), fields: [...faults] });
}

const plural = (count: number, one: string): string => {
  if (count === 1) return `1 ${one}`;
  const [head = '', ...rest] = one.split(/ (?=that|of)/);
  return `${count} ${[`${head}s`, ...rest].join(' ')}`;
};
const listed = (names: readonly string[]): string =>
  names.length <= 4 ? names.join(', ') : `${names.slice(0, 3).join(', ')} and ${names.length - 3} more`;

/** Why a part can't go, and what to do; null: it can. */
export function hangingWords(part: string, { parts, records }: Hanging): string | null {
  if (records.length > 0)
    return `${part} stays: ${records.map((r) => plural(r.count, r.what)).join(', ')} hang${records.length === 1 && records[0]?.count === 1 ? 's' : ''} on it. Rename it, or leave it as it is.`;
  if (parts.length > 0)
    return `${part} is in use by ${parts.map((p) => `${p.names.length === 1 ? p.what : `${p.what}s`} ${listed(p.names)}`).join(' and ')}. Change those first.`;
  return null;
}
