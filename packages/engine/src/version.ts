/** Any change of the bytes of a standings document changes this. */
export const ENGINE_VERSION = "0.4.0";

/** Any change of what a serialised state holds changes this: an older one is thrown away and rebuilt. */
export const STATE_VERSION = 4;
