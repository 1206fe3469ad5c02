"""Writes orchestrator/sampling/sobol-directions.ts from the table that SciPy ships.

S. Joe and F. Y. Kuo, "Constructing Sobol sequences with better two-dimensional projections",
SIAM J. Sci. Comput. 30 (2008) 2635, doi:10.1137/070709359; file new-joe-kuo-6.21201.
Run: python3 test/golden/sampling/directions.py > orchestrator/sampling/sobol-directions.ts
"""

import os

import numpy as np
import scipy.stats

DIMENSIONS = 50

table = np.load(os.path.join(os.path.dirname(scipy.stats.__file__), "_sobol_direction_numbers.npz"))
print("""/** Primitive polynomials over GF(2) and initial direction numbers of Sobol's sequence.
 *  Row d is dimension d: the polynomial as an integer (bit k is the coefficient of x^k, both end bits included),
 *  then the odd numbers m_1, m_2, ... of the recurrence. Dimension 0 is the van der Corput sequence: every m is 1.
 *  Written by test/golden/sampling/directions.py.
 *  Source: S. Joe and F. Y. Kuo, "Constructing Sobol sequences with better two-dimensional projections",
 *  SIAM J. Sci. Comput. 30 (2008) 2635, doi:10.1137/070709359, file new-joe-kuo-6.21201 (first 50 dimensions),
 *  checked against the copy in SciPy. */
export const DIRECTIONS: readonly { readonly polynomial: number; readonly m: readonly number[] }[] = [""")
for d in range(DIMENSIONS):
    polynomial = int(table["poly"][d])
    degree = polynomial.bit_length() - 1
    m = ", ".join(str(int(x)) for x in table["vinit"][d][:degree])
    print(f"  {{ polynomial: {polynomial}, m: [{m}] }},")
print("];")
