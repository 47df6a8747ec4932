/** Everything that is varied: the names are those of study.yaml. */
export interface Parameters {
  /** Matter today over the critical density; space is flat. */
  readonly omega_m: number;
  /** Rms of the linear matter fluctuations today in spheres of 8 Mpc/h, neutrinos included. */
  readonly sigma_8: number;
  /** Spectral index of the primordial fluctuations. */
  readonly n_s: number;
  /** Share of the small-scale power that gas driven out of haloes takes away: none in maps made with gravity alone. */
  readonly feedback: number;
  /** Multiplicative error of the shear calibration: the measured convergence is (1 + m) times the true one. */
  readonly shear_bias: number;
}

type ParameterName = keyof Parameters;

export const fiducial: Parameters = { omega_m: 0.3, sigma_8: 0.8, n_s: 0.96, feedback: 0, shear_bias: 0 };

/** Where a parameter's derivative is simulated, and whether the fiducial maps are one more node. */
export interface Scheme {
  readonly parameter: ParameterName;
  readonly nodes: readonly { readonly file: string; readonly at: number }[];
  readonly fiducialNode: boolean;
}

/**
 * Four nodes for sigma_8, so that the truncation error of its derivative can be seen. The fiducial
 * maps know gravity alone, and feedback cannot be negative: it is differenced one-sided, from them and two more nodes. The others are central differences.
 */
export const schemes: readonly Scheme[] = [
  { parameter: 'omega_m', nodes: [{ file: 'omega_m_minus', at: 0.27 }, { file: 'omega_m_plus', at: 0.33 }], fiducialNode: false },
  {
    parameter: 'sigma_8',
    nodes: [
      { file: 'sigma_8_minus_far', at: 0.74 },
      { file: 'sigma_8_minus', at: 0.77 },
      { file: 'sigma_8_plus', at: 0.83 },
      { file: 'sigma_8_plus_far', at: 0.86 },
    ],
    fiducialNode: false,
  },
  { parameter: 'n_s', nodes: [{ file: 'n_s_minus', at: 0.91 }, { file: 'n_s_plus', at: 1.01 }], fiducialNode: false },
  { parameter: 'feedback', nodes: [{ file: 'feedback_near', at: 0.1 }, { file: 'feedback_far', at: 0.2 }], fiducialNode: true },
  { parameter: 'shear_bias', nodes: [{ file: 'shear_bias_minus', at: -0.05 }, { file: 'shear_bias_plus', at: 0.05 }], fiducialNode: false },
];
