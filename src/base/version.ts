/** The program version; a test holds it equal to package.json. */
export const programVersion = '0.1.0';
