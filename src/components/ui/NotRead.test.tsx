import { renderToStaticMarkup } from 'react-dom/server';
import { describe, expect, it } from 'vitest';
import { NotRead } from './NotRead';

const shown = (error: Error | null, retry?: () => void) =>
  renderToStaticMarkup(
    <NotRead error={error} title="The walk could not be read again" onRetry={retry}>
      Where the stops are still holds.
    </NotRead>,
  );

describe('what could not be read', () => {
  it('is silent while all is well', () => {
    expect(shown(null)).toBe('');
  });
  it('says why and what follows', () => {
    const text = shown(new Error('The server is out of reach.')).replace(/<[^>]*>/g, '');
    expect(text).toContain('The walk could not be read again');
    expect(text).toContain('The server is out of reach. Where the stops are still holds.');
  });
  it('offers another try only where there is one', () => {
    const error = new Error('Away.');
    expect(shown(error, () => undefined)).toContain('Try again');
    expect(shown(error)).not.toContain('Try again');
  });
});
