/** Changes whenever any digit of any answer changes; stored with every reading. */
export const ENGINE_VERSION = '0.7.0';
