/** Constants of nature and conversions, each with its source. */

/** Speed of light in vacuum, m/s, exact. @source SI definition of the metre. */
export const SPEED_OF_LIGHT = 299_792_458;

/** Decibels in one neper, 20/ln 10. @source ISO 80000-3 definition of the neper. */
export const DB_PER_NEPER = 20 / Math.LN10;

/** Metres in one foot, exact. @source International yard and pound agreement, 1959. */
export const METRES_PER_FOOT = 0.3048;

/** Temperature to which cable tables refer, °C. @source IEC 61196-1 (attenuation at 20 °C). */
export const TABLE_TEMPERATURE_C = 20;

/** Temperature coefficient of copper's resistivity per kelvin at 20 °C. @source NBS Handbook 100 (1966). */
export const COPPER_TEMPERATURE_COEFFICIENT = 0.0039;
