/** The version written into every result; equal to package.json's. */
export const ENGINE_VERSION = '0.3.0';
