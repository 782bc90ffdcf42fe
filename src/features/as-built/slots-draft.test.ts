import { describe, expect, it } from 'vitest';
import type { StringBuilt } from '../../schemas/api/as-built';
import { draftBody, EMPTY_DRAFT, isEmpty, leaving, rebased, withFact, withSerial } from './slots-draft';

const slot = (position: number, serial: string | null) => ({
  position,
  serial,
  moduleType: 'mono',
  roofPlace: '',
  roofX: null,
  roofY: null,
  placedFrom: null,
});
const string = (serials: (string | null)[]): StringBuilt => ({
  id: 'b3',
  name: 'B3',
  kind: 'monitored',
  unitType: 'u',
  plane: 'p',
  input: 'i',
  zone: 'z',
  logger: 'l',
  transmitters: [],
  cableResistance: 0.3,
  homeRunLeavesArray: true,
  slots: serials.map((s, i) => slot(i + 1, s)),
});
const how = { move: false, retype: false, reason: '' };

describe('what was typed into slots', () => {
  const b3 = string(['AAAA-1', null, 'AAAA-3']);

  it('is sent with what was seen there', () => {
    const draft = withSerial(withSerial(EMPTY_DRAFT, b3, 2, 'bbbb-2'), b3, 1, '');
    const { body, positions } = draftBody(b3, draft, how);
    expect(positions).toEqual([1, 2]);
    expect(body.changes).toEqual([
      { slot: { string: 'b3', position: 1 }, serial: null, expected: 'AAAA-1' },
      { slot: { string: 'b3', position: 2 }, serial: 'bbbb-2', expected: null },
    ]);
    expect(leaving(draft)).toEqual(['AAAA-1']);
  });

  it('is no change when it is typed back', () => {
    const draft = withSerial(withSerial(EMPTY_DRAFT, b3, 1, 'AAA'), b3, 1, 'AAAA-1');
    expect(isEmpty(draft)).toBe(true);
    expect(draft.seen).toEqual({});
  });

  it('keeps what was seen when typing began, also when the slot changes meanwhile', () => {
    const draft = withSerial(EMPTY_DRAFT, b3, 1, 'X');
    const meanwhile = string(['OTHER-1', null, 'AAAA-3']);
    const more = withSerial(draft, meanwhile, 1, 'XY');
    expect(more.seen).toEqual({ 1: 'AAAA-1' });
    expect(rebased(more, meanwhile).seen).toEqual({ 1: 'OTHER-1' });
    expect(rebased(more, meanwhile).serials).toEqual({ 1: 'XY' });
  });

  it('facts go along, and only those that changed', () => {
    const draft = withFact(withFact(EMPTY_DRAFT, b3, 'places', 2, 'by the vent'), b3, 'types', 2, 'mono');
    expect(draftBody(b3, draft, how).body.slots).toEqual([
      { string: 'b3', position: 2, roofPlace: 'by the vent' },
    ]);
  });
});
