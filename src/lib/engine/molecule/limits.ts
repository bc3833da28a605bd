/** The largest molecule that is taken, hydrogens included. */
export const ATOM_LIMIT = 200;
