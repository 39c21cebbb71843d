/** How the chip is run: what stands behind its ports, what its parts bear, and for how long. */

/** What a pump can do; what is not stated is not judged. */
export interface Pump {
  /** Greatest pressure, Pa. */
  readonly pressure?: number;
  /** Greatest flow, m^3/s. */
  readonly flow?: number;
  /** Of a syringe, m: with it the speed of its plunger is given. */
  readonly bore?: number;
  /** What it holds, or can take up, m^3. */
  readonly volume?: number;
}

/** An open vessel, upright, at a port: its level falls or rises with what flows. One of bore and area. */
export interface Reservoir {
  /** m */
  readonly bore?: number;
  /** Of the free surface, m^2. */
  readonly area?: number;
  /** What is in it at the start, m^3; it runs dry after that. */
  readonly volume?: number;
}

/** What chip and fittings bear, as their makers state it. */
export interface Rating {
  /** Pa, gauge. */
  readonly pressure: number;
}

export interface Assay {
  /** s */
  readonly time: number;
}
