/** The version of the numerical core, kept with every analysis; package.json carries the same. */
export const engineVersion = '0.1.0'
