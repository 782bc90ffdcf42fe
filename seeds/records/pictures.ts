import sharp from 'sharp';

/** Drawings that stand in for the photos of a roof: what a technician would have pointed the camera at. */

export type Scene = 'leads' | 'connector' | 'label' | 'sagging';

const frame = (inner: string, caption: string): string => `
<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 1200 900" width="1200" height="900">
  <rect width="1200" height="900" fill="#8d8f8a"/>
  <rect y="0" width="1200" height="520" fill="#2b3a55"/>
  ${Array.from({ length: 12 }, (_, i) => `<path d="M${i * 110} 0V520" stroke="#4a5d80" stroke-width="3"/>`).join('')}
  <rect y="500" width="1200" height="64" fill="#c9ccd0"/><rect y="548" width="1200" height="16" fill="#9da2a8"/>
  ${inner}
  <rect x="24" y="836" width="1152" height="44" fill="#10181d" opacity="0.65"/>
  <text x="44" y="867" font-family="sans-serif" font-size="26" fill="#f2f2ee">${caption}</text>
</svg>`;
const unit = (x: number, y: number): string => `
  <rect x="${x}" y="${y}" width="250" height="150" rx="14" fill="#1b1f24"/>
  <rect x="${x + 34}" y="${y + 34}" width="130" height="70" fill="#eceae2"/>
  ${Array.from({ length: 16 }, (_, i) => `<rect x="${x + 44 + i * 7}" y="${y + 48}" width="${i % 3 === 0 ? 4 : 2}" height="42" fill="#222"/>`).join('')}`;
const lead = (path: string): string =>
  `<path d="${path}" fill="none" stroke="#14171a" stroke-width="16" stroke-linecap="round"/>`;

const SCENES: Record<Scene, string> = {
  leads: frame(
    `${lead('M560 700 C560 790 420 760 300 720')}${lead('M640 700 C640 800 800 770 960 730')}${unit(480, 560)}`,
    'Sample picture: leads go down, long ones to the neighbours',
  ),
  connector: frame(
    `${lead('M100 690H480')}${lead('M760 690H1110')}<rect x="470" y="650" width="140" height="80" rx="12" fill="#22272c"/>
     <rect x="600" y="660" width="170" height="60" rx="10" fill="#3a424a"/><path d="M604 655v70" stroke="#f2c230" stroke-width="5"/>`,
    'Sample picture: two halves of different makers',
  ),
  label: frame(
    `<rect x="330" y="590" width="540" height="200" rx="8" fill="#f4f2ea"/>
     <text x="600" y="680" text-anchor="middle" font-family="sans-serif" font-size="76" font-weight="bold" fill="#161616">STRING</text>
     <text x="600" y="752" text-anchor="middle" font-family="sans-serif" font-size="48" fill="#161616">+ at the north end</text>`,
    'Sample picture: marking at the array’s end',
  ),
  sagging: frame(
    `${unit(220, 560)}${lead('M300 700 C330 840 720 880 1000 690')}`,
    'Sample picture: a loop lies on the roof',
  ),
};

/** A scene as a camera's picture would be kept, with its small form. */
export async function pictureOf(
  scene: Scene,
): Promise<{ data: Buffer; thumbnail: Buffer; width: number; height: number }> {
  const data = await sharp(Buffer.from(SCENES[scene])).jpeg({ quality: 74 }).toBuffer();
  const thumbnail = await sharp(data).resize({ width: 320 }).jpeg({ quality: 70 }).toBuffer();
  return { data, thumbnail, width: 1200, height: 900 };
}
