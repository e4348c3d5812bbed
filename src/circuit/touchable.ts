/**
 * Beyond this a DC voltage may not be touched, in V: ES1 of IEC 62368-1 (from memory; a secondary source for
 * SELV agrees).
 */
export const touchable = 60;
