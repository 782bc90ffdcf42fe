/** Every time zone that a site may have, as this server knows them. */
export const timeZones = (): string[] => [...new Set([...Intl.supportedValuesOf('timeZone'), 'UTC'])].sort();
