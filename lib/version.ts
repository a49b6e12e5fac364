import packageJson from '../package.json';

/** Which version of the program this is. */
export const version: string = packageJson.version;
