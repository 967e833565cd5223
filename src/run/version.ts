/** The version of Latchmap, as in its package. */
export const VERSION = "0.1.0";

/** The version of the result folder's layout. A reader refuses a newer one by name. */
export const RESULT_VERSION = 1;
