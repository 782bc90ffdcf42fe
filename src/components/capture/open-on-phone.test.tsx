import { renderToStaticMarkup } from 'react-dom/server';
import { expect, it } from 'vitest';
import { OpenOnPhone } from './OpenOnPhone';

const SITE = '0b0f6a53-6f5e-4a55-9d6b-2c0a3a0c1f11';

it('says where a phone could neither open its camera nor keep the page', () => {
  const drawn = (origin: string) =>
    renderToStaticMarkup(<OpenOnPhone site={SITE} siteName="Weirside Clinic" origin={origin} />);
  expect(drawn('https://roofs.example')).not.toContain('plain HTTP');
  expect(drawn('http://127.0.0.1:4321')).not.toContain('plain HTTP');
  expect(drawn('http://192.168.1.20:4321')).toContain('plain HTTP');
  expect(drawn('https://roofs.example')).toContain(`https://roofs.example/capture/${SITE}`);
});
