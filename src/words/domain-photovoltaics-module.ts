/** How a module's curve differs from its datasheet; `off` with its sign. */
export const datasheetSaid = {
  maximumPowerPoint: (vmpOff: string, impOff: string) =>
    `vmp and imp can't both be met: off by ${vmpOff} and ${impOff}`,
  betaVoc: (off: string) => `betaVoc can't be met with a silicon junction: off by ${off}`,
  gammaPmp: (off: string) => `gammaPmp that follows differs by ${off}: check the coefficients`,
  ideality: (ideality: string, cells: number) =>
    `ideality ${ideality} is unusual for ${cells} silicon cells: check the cell count`,
};
