/** A module's datasheet at STC (1000 W/m², 25 °C cell, AM 1.5), in the names of pv-terms with the suffix Ref. */
export interface ModuleType {
  name: string;
  /** V */
  vocRef: number;
  /** A */
  iscRef: number;
  /** V */
  vmpRef: number;
  /** A */
  impRef: number;
  /** Relative temperature coefficient of voc, 1/K (negative). */
  betaVoc: number;
  /** Relative temperature coefficient of isc, 1/K. */
  alphaIsc: number;
  /** Relative temperature coefficient of pmp, 1/K (negative). */
  gammaPmp: number;
  cellsInSeries: number;
  /** Sub-strings of cells, each with one bypass diode. */
  bypassGroups: number;
  /** Nominal operating cell temperature, °C. */
  noct: number;
}

/** All that the catalogue says of a module. */
export interface ModuleSheet extends ModuleType {
  /** V */
  voltageSystemMax: number;
  /** A, of a fuse in series with a string. */
  fuseMax: number;
  /** m */
  lengthM: number;
  widthM: number;
  /** Connector type of its leads; null: not entered. */
  connector: string | null;
}
