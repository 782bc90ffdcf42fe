import { describe, expect, it } from 'vitest';
import { PART_DEFAULTS } from '../../domain/commissioning/as-built/parts';
import { changedKeys, formOf, readForm, serverFaults } from './form';

describe('a form', () => {
  it('gives back what it was filled with', () => {
    const values = { name: 'South roof', surfaceTilt: 12.5, surfaceAzimuth: 180, albedo: 0.2 };
    expect(readForm('plane', formOf('plane', values)).values).toEqual(values);
  });

  it('takes a comma, a minus sign and the unit', () => {
    const form = {
      ...formOf('site', PART_DEFAULTS.site),
      name: 'X',
      latitude: '51,5 °',
      longitude: '−0.12',
      temperatureMin: '−12',
    };
    expect(readForm('site', form).values).toMatchObject({
      latitude: 51.5,
      longitude: -0.12,
      temperatureMin: -12,
    });
  });

  it('says at each field what is wrong, and keeps what was typed', () => {
    const form = { ...formOf('plane', PART_DEFAULTS.plane), surfaceTilt: 'steep', surfaceAzimuth: '400' };
    const { faults } = readForm('plane', form);
    expect(Object.keys(faults ?? {}).sort()).toEqual(['name', 'surfaceAzimuth', 'surfaceTilt']);
    expect(faults?.surfaceTilt).toContain('"steep"');
    expect(form.surfaceTilt).toBe('steep');
  });

  it('an empty number that may be empty is not known', () => {
    const form = { ...formOf('site', PART_DEFAULTS.site), name: 'X', latitude: '1', longitude: '2' };
    expect(readForm('site', form).values).toMatchObject({ temperatureMin: null, temperatureMax: null });
  });

  it('what the server says finds its field', () => {
    expect(
      serverFaults([
        { field: 'values.name', message: 'taken' },
        { field: 'body.values.serial', message: 'none' },
        { field: 'reason', message: 'say why' },
      ]),
    ).toEqual({ name: 'taken', serial: 'none', reason: 'say why' });
  });

  it('knows what was changed', () => {
    expect(
      changedKeys(
        'transmitter',
        { name: 'T', zone: 'z', strings: ['a', 'b'] },
        { name: 'T', zone: 'y', strings: ['b', 'a'] },
      ),
    ).toEqual(['zone']);
  });
});
