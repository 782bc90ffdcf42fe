import { describe, expect, it } from 'vitest';
import { letter } from './letter';

const parts = {
  greeting: 'Hello Ada <b>',
  paragraphs: ['The pack of "Mill & Barn" is ready.'],
  figures: [['Units', '184']] as const,
  action: { words: 'Open the pack', href: 'https://wakeline.example/p?a=1&b=2' },
  footer: 'Sent by Wakeline.',
};

describe('a letter', () => {
  it('says the same in text and in HTML', () => {
    const { text, html } = letter(parts);
    for (const words of ['184', 'is ready.', 'Sent by Wakeline.']) {
      expect(text).toContain(words);
      expect(html).toContain(words);
    }
    expect(text).toContain('https://wakeline.example/p?a=1&b=2');
    expect(html).toContain('href="https://wakeline.example/p?a=1&amp;b=2"');
  });

  it('never lets a name become markup', () => {
    expect(letter(parts).html).not.toContain('<b>');
    expect(letter(parts).html).toContain('Hello Ada &lt;b&gt;');
    expect(letter({ ...parts, paragraphs: ['<script>alert(1)</script>'] }).html).not.toContain('<script');
    expect(letter({ ...parts, action: { words: 'x', href: '"><img src=x>' } }).html).not.toContain('"><img');
  });
});
