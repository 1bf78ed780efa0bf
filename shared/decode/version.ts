/** Name and version of the library, as results and stored decodes name it. */
export const TOOL = { name: 'linewitness', version: '0.1.0' } as const;
