/** Values of the quantity `vacuumClass`: indices into its labels. */
export const STABLE = 0;
export const METASTABLE = 1;
export const UNSTABLE = 2;
/** A coupling passes 4 pi below the cut-off and the vacuum was not unstable until there: nothing can be said. */
export const NOT_PERTURBATIVE = 3;
export const VACUUM_CLASSES: readonly string[] = ['stable', 'metastable', 'unstable', 'not perturbative'];
