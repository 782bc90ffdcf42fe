export const developers = {
  operations: 'Operations',
  findLabel: 'Find an operation, a parameter or a field',
  ofOperations: (shown: number, operations: number) => `${shown} of ${operations} operations`,
  searchHint: 'Search for a thing (unit, event), a parameter (cursor) or a field (voltage).',
  nothingFound: (q: string) => `Nothing here has “${q}” in it`,
  exampleCopied: (path: string) => `The example of ${path} is on your clipboard.`,
};

export const operationSheet = {
  scope: 'scope ',
  anyToken: 'any token',
  itTakes: 'It takes',
  itAnswers: 'It answers',
  fields: 'Fields',
  needed: ', needed',
  exampleForAShell: 'Example for a shell',
  copied: 'Copied',
  copyTheExample: 'Copy the example',
};
