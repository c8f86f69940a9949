// On the global object: a bundler may give each entry point a copy of this module, and there is one
// process to close.
const place = globalThis as { weighhouseClosing?: AbortController };

/**
 * Aborted once, when the process is told to stop: open streams end by it, since a server waits for
 * them before it exits.
 */
export const closing = (place.weighhouseClosing ??= new AbortController());
