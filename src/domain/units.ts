/** Grams in an avoirdupois pound and ounce: exact by definition. */
export const GRAMS_PER_POUND = 453.59237;
export const GRAMS_PER_OUNCE = GRAMS_PER_POUND / 16;

/** An inch is 2.54 cm: exact by definition. */
export const CM_PER_INCH = 2.54;

/** A US gallon is 231 cubic inches, 8 pints, 128 fluid ounces. */
export const CM3_PER_US_GALLON = 231 * CM_PER_INCH ** 3;
export const CM3_PER_US_PINT = CM3_PER_US_GALLON / 8;
export const CM3_PER_US_FLUID_OUNCE = CM3_PER_US_GALLON / 128;
