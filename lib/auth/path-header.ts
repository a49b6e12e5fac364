/** Set by the proxy, so that signing in can lead back to the page that asked for it. */
export const pathHeader = 'x-witnessmark-path';
