import packageFile from '../../package.json' with { type: 'json' };

/** Version of the program, from package.json at build time. */
export const PROGRAM_VERSION: string = packageFile.version;
