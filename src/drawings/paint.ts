/** The colours of a drawing by name. On screen they are the tokens, which swap with the theme. */
export interface Paint {
  film: string;
  sheet: string;
  rule: string;
  ruleFaint: string;
  ink: string;
  ink2: string;
  ink3: string;
  petrol: string;
  petrolWash: string;
  plum: string;
  plumWash: string;
  rust: string;
  rustInk: string;
  rustWash: string;
  crimson: string;
  crimsonWash: string;
  slate: string;
}

export const SCREEN: Paint = {
  film: 'var(--film)',
  sheet: 'var(--sheet)',
  rule: 'var(--rule)',
  ruleFaint: 'var(--rule-faint)',
  ink: 'var(--ink)',
  ink2: 'var(--ink-2)',
  ink3: 'var(--ink-3)',
  petrol: 'var(--petrol)',
  petrolWash: 'var(--petrol-wash)',
  plum: 'var(--plum)',
  plumWash: 'var(--plum-wash)',
  rust: 'var(--rust)',
  rustInk: 'var(--rust-ink)',
  rustWash: 'var(--rust-wash)',
  crimson: 'var(--crimson)',
  crimsonWash: 'var(--crimson-wash)',
  slate: 'var(--slate)',
};

/** For paper and mail, where there are no tokens: the light theme's values. */
export const PAPER: Paint = {
  film: '#f3f6f5',
  sheet: '#ffffff',
  rule: '#cfd8d6',
  ruleFaint: '#e3e9e7',
  ink: '#13212b',
  ink2: '#4e5d66',
  ink3: '#5f6e78',
  petrol: '#0e5a6b',
  petrolWash: '#dcebec',
  plum: '#6b4a9b',
  plumWash: '#eae3f3',
  rust: '#b4501e',
  rustInk: '#7e3510',
  rustWash: '#f7e4d6',
  crimson: '#a3122f',
  crimsonWash: '#f6dce0',
  slate: '#6e7880',
};
