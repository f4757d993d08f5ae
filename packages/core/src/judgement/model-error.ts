/**
 * What even the right structure is missed by, because theory is not exact: part η of rms|χ(R)| in the window, one constant.
 */
export const MODEL_ERROR = 0.1;
