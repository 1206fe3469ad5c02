/** Values of the quantity `vacuumClass`: indices into its labels. */
export const STABLE = 0;
export const METASTABLE = 1;
export const UNSTABLE = 2;
export const VACUUM_CLASSES: readonly string[] = ['stable', 'metastable', 'unstable'];
