import { describe, expect, it } from 'vitest';
import { codeOf, UNIT_STATES, VERDICTS } from './codes';
import { conductThen } from './conduct-then';

const stuck = { state: codeOf(UNIT_STATES, 'shutdown'), verdict: codeOf(VERDICTS, 'stuck') };
const silent = { state: codeOf(UNIT_STATES, 'silent'), verdict: codeOf(VERDICTS, 'ok') };
const unheard = { state: codeOf(UNIT_STATES, 'unheard'), verdict: codeOf(VERDICTS, 'ok') };
const said = (claim: number | null, voltage: number | null) => ({ claim, voltage, voltageIn: null });

describe('a unit at a moment of the past', () => {
  it('is what it said then, with the verdict that stood', () => {
    expect(conductThen(said(2, -0.5), stuck, false, 38)).toEqual({ state: 'shutdown', verdict: 'stuck' });
    expect(conductThen(said(1, 38), null, false, 38)).toEqual({ state: 'passing', verdict: null });
  });

  it('that passes again is no longer stuck, whatever stood a minute before', () => {
    expect(conductThen(said(1, 38), stuck, false, 38)).toEqual({ state: 'passing', verdict: 'ok' });
  });

  it('that said nothing is silent, and unheard before its roll call', () => {
    expect(conductThen(said(null, null), stuck, false, 38).state).toBe('silent');
    expect(conductThen(said(null, null), unheard, false, 38).state).toBe('unheard');
    expect(conductThen(said(0, 37), silent, false, 38).state).toBe('passing');
  });

  it('is told by its mean voltage where no report is kept', () => {
    expect(conductThen(said(null, 36), null, true, 38).state).toBe('passing');
    expect(conductThen(said(null, 0.4), null, true, 38).state).toBe('shutdown');
    expect(conductThen(said(null, 0.6), null, true, null).state).toBe('shutdown');
  });
});
