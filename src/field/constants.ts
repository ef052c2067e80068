/** permittivity of the vacuum, F/m */
export const epsilon = 8.8541878128e-12
/** 4πε0, F/m: capacitances are solved in metres and multiplied by this */
export const fourPiEpsilon = 4 * Math.PI * epsilon
