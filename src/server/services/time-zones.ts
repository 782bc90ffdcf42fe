/**
 * Names of today in the IANA database (its file `backward`; from memory) for zones that engines list under an older one:
 * somebody looks for Asia/Kolkata and finds Asia/Calcutta.
 */
const OF_TODAY = [
  'Africa/Asmara',
  'America/Argentina/Buenos_Aires',
  'America/Argentina/Catamarca',
  'America/Argentina/Cordoba',
  'America/Argentina/Jujuy',
  'America/Argentina/Mendoza',
  'America/Atikokan',
  'America/Indiana/Indianapolis',
  'America/Kentucky/Louisville',
  'America/Nuuk',
  'Asia/Ho_Chi_Minh',
  'Asia/Kathmandu',
  'Asia/Kolkata',
  'Asia/Yangon',
  'Atlantic/Faroe',
  'Europe/Kyiv',
  'Pacific/Chuuk',
  'Pacific/Kanton',
  'Pacific/Pohnpei',
];

function isKnown(timeZone: string): boolean {
  try {
    return Boolean(new Intl.DateTimeFormat('en', { timeZone }));
  } catch {
    return false; // an older engine
  }
}

/** Zones to choose from: those that the engine lists, under their names of today too, for a chosen one may be either. */
export const timeZones = (): string[] =>
  [...new Set([...Intl.supportedValuesOf('timeZone'), ...OF_TODAY.filter(isKnown), 'UTC'])].sort();
