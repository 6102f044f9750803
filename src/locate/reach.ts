/** What a sweep can do on a line: resolution, unambiguous distance, weakest visible echo at the far end. */
export type Reach = {
  /** 6 dB width of one echo with the window in use, m. */
  readonly resolutionM: number;
  /** Distance at which echoes fold back, m; Infinity never occurs (an uneven sweep uses its smallest step). */
  readonly unambiguousM: number;
  /** Apparent return loss of the weakest echo visible at the far end above the sweep's noise floor, dB. */
  readonly weakestReturnLossDb: number;
  /** Where the impedance profile comes from. */
  readonly impedanceProfile: 'measured' | 'modelled' | 'no';
};
