/** Folder in which every audited page leaves a picture for the eye; undefined: none is taken. */
export const LOOK_DIR = process.env.ELLWAND_LOOK_DIR;
