/** Returns an instant, `2031-03-01T00:00:00.000000Z`. Only tests and the demo pass one. */
export type Clock = () => string;
