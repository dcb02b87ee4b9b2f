/** Whether pictures that belong to the repository are taken anew. */
export const WRITES_PICTURES = process.env.ELLWAND_WRITE_PICTURES === '1';

/** Folder in which every audited page leaves a picture for the eye; undefined: none is taken. */
export const LOOK_DIR = process.env.ELLWAND_LOOK_DIR;
