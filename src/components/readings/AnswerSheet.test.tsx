import { renderToStaticMarkup } from 'react-dom/server';
import { expect, it } from 'vitest';
import { interpretReading } from '../../domain/readings/interpret';
import { AnswerSheet } from './AnswerSheet';
import { readForm } from './form';
import { DEFAULTS } from './form-choices';

const shownOf = (some: Readonly<Record<string, string>>): string => {
  const { question } = readForm({ ...DEFAULTS, ...some });
  const answer = question && interpretReading(question);
  return renderToStaticMarkup(
    <AnswerSheet answer={answer} question={question} waiting={false} faults={{}} />,
  );
};

it('what was expected is named as such before it, not under it', () => {
  const html = shownOf({ v: '480' });
  const was = html.indexOf('Expected was:');
  expect(was).toBeGreaterThan(html.indexOf('Not as expected'));
  expect(html.indexOf('All 14 units are in shutdown')).toBeGreaterThan(was);
  expect(html).not.toContain('This is what was expected');
});

it('nothing else is named as expected where the reading is what was expected', () => {
  expect(shownOf({ v: '8.4' })).not.toContain('Expected was:');
});

it('one reading to earth alone asks for the other and gives no chance', () => {
  const html = shownOf({ kind: 'monitored', heard: '14', commanded: 'released', v: '480', pe: '2' });
  expect(html).toContain('take both');
  expect(html).not.toContain('Chance of a fault');
});
