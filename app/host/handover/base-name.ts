/** The last part of a path of any system: a report is read elsewhere than where it was written. */
export const baseName = (path: string) => path.split(/[\\/]/).at(-1) ?? path;
