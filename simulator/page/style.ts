/** The plant's page: the house's paper and type, a ground of its own so that nobody takes it for Wakeline. */
export const PAGE_STYLE = `
:root { --film: #ece9e1; --sheet: #fff; --rule: #cfd8d6; --ink: #13212b; --ink-2: #4e5d66; --petrol: #0e5a6b; --plum: #6b4a9b; --rust: #b4501e; --slate: #6e7880; color-scheme: light dark; }
@media (prefers-color-scheme: dark) { :root { --film: #1a1814; --sheet: #23211c; --rule: #3c3a33; --ink: #e8eef0; --ink-2: #a9b6bd; --petrol: #5db7c9; --plum: #b79be3; --rust: #e88a55; --slate: #87939b; } }
* { box-sizing: border-box; }
body { margin: 0; padding: 16px clamp(12px, 4vw, 48px) 48px; background: var(--film); color: var(--ink); font: 14px/20px 'Inter Tight', system-ui, sans-serif; font-variant-numeric: tabular-nums; }
h1 { font-size: 26px; line-height: 32px; letter-spacing: -0.02em; margin: 12px 0 8px; }
h2 { font-size: 16px; margin: 0 0 8px; }
a { color: var(--petrol); }
.outside { border: 2px dashed var(--ink-2); padding: 8px 12px; margin: 0 0 12px; }
.sheet { background: var(--sheet); border-top: 2px solid var(--ink); border-bottom: 1px solid var(--rule); padding: 12px 16px; margin: 0 0 20px; }
.scroll { overflow-x: auto; }
table { border-collapse: collapse; width: 100%; }
caption { text-align: left; color: var(--ink-2); padding-bottom: 8px; }
th, td { text-align: left; padding: 6px 12px 6px 0; border-top: 1px solid var(--rule); vertical-align: middle; white-space: nowrap; }
thead th { border-top: 0; font-weight: 500; color: var(--ink-2); }
.n { text-align: right; padding-right: 24px; }
.quiet { color: var(--ink-2); }
.switches { list-style: none; margin: 0; padding: 0; }
.switches li { display: flex; flex-wrap: wrap; gap: 12px; align-items: center; padding: 8px 0; border-top: 1px solid var(--rule); }
.switches li > :first-child { flex: 1 1 220px; }
.state { font-weight: 600; }
button { font: inherit; font-weight: 600; min-height: 44px; padding: 0 16px; border: 1px solid var(--ink); border-radius: 3px; background: var(--ink); color: var(--sheet); cursor: pointer; }
button:focus-visible, select:focus-visible, input:focus-visible, a:focus-visible { outline: 3px solid var(--petrol); outline-offset: 2px; }
form { display: flex; flex-wrap: wrap; gap: 12px; align-items: end; padding-top: 12px; border-top: 1px solid var(--rule); }
label { display: grid; gap: 4px; color: var(--ink-2); }
label[hidden] { display: none; }
select, input { font: inherit; min-height: 44px; padding: 0 8px; border: 1px solid var(--slate); border-radius: 3px; background: var(--sheet); color: var(--ink); max-width: 240px; }
#fault-said { flex-basis: 100%; margin: 0; }
.units { display: flex; gap: 2px; }
.unit { display: inline-block; min-width: 40px; padding: 0 3px; text-align: right; border-bottom: 4px solid var(--petrol); }
.unit.shutdown, .unit.starting { border-color: var(--plum); }
.unit.unpowered { border-color: var(--slate); border-bottom-style: dotted; }
.unit.unheard { border-bottom-style: dashed; }
.unit.odd { border-color: var(--rust); }
`;
