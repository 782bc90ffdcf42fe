/** Names of what a new organisation's catalogue begins with, and what is written beside them; all of our own invention. */
export const starterNames = {
  halyard: 'Halyard 4',
  halyardWide: 'Halyard 6, wide contact',
  bittern: 'Bittern K2',
  oxbow: 'Oxbow 30',
  mono450: 'Mono 450, 144 half cells',
  mono430: 'Mono 430, 108 half cells',
  poly285: 'Poly 285, 60 cells',
  mono545: 'Mono 545, 144 half cells',
  mono405: 'Mono 405, 108 half cells, black',
  reportingBoth: 'Reporting unit, both sides',
  reportingOutput: 'Reporting unit, output side',
  shutdown: 'Shutdown unit',
  optimizing: 'Optimizing unit',
  home6: 'Home inverter 6 kW, 2 inputs',
  roof20: 'Roof inverter 20 kW, 4 inputs',
  roof50: 'Roof inverter 50 kW, 8 inputs',
  field110: 'Field inverter 110 kW, 12 inputs',
};

export const starterTexts = {
  halyardTool: 'Crimp die HF-46, opening fork HF-2',
  halyardWideTool: 'Crimp die HF-60, opening fork HF-2',
  bitternTool: 'Crimp die K-25, two-pin fork',
  oxbowTool: 'Crimp die OX, opening key OX-k',
  pairEvidence:
    'Joint mating statement TF/BC-07, edition 3, page 2 (an invented document of the starter set)',
};
