/** Stored with every result. Raise it whenever the same document would give other figures. */
export const ENGINE_VERSION = '1.0.0';
