/** What is said of two connector halves, and what it is held against. */
export const connectorPairSaid = {
  clause: 'NEC 690.33(C), 2020 and 2023; IEC 62852; IEC TR 63225',
  neitherRecorded: 'Neither half’s type is recorded: whether the two may be mated can’t be told.',
  oneNotRecorded: 'The type of one half is not recorded: whether the two may be mated can’t be told.',
  readBoth: 'Read maker and type off both halves and choose them from the catalogue.',
  identical: (half: string) => `Both halves are ${half}.`,
  documented: (first: string, second: string) => `${first} and ${second} are documented as intermatable.`,
  notDocumented: (first: string, second: string) =>
    `${first} and ${second} are not identical and no document says that they may be mated: a fire risk, even where they click together.`,
  fitIdentical:
    'Fit identical connectors on both halves, or have a manager record the document that both makers stand by.',
};
