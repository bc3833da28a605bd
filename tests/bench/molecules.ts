/** The molecules of the bench, 21 to 71 atoms with hydrogens. */
export const benchMolecules = [
  { name: 'aspirin', smiles: 'CC(=O)Oc1ccccc1C(=O)O' },
  { name: 'ibuprofen', smiles: 'CC(C)Cc1ccc(cc1)[C@@H](C)C(=O)O' },
  { name: 'propranolol', smiles: 'CC(C)NC[C@H](O)COc1cccc2ccccc12' },
  {
    name: 'testosterone',
    smiles: 'C[C@]12CC[C@H]3[C@@H](CCC4=CC(=O)CC[C@]34C)[C@@H]1CC[C@@H]2O',
  },
  { name: 'losartan', smiles: 'CCCCc1nc(Cl)c(CO)n1Cc1ccc(cc1)-c1ccccc1-c1nnn[nH]1' },
  { name: 'sildenafil', smiles: 'CCCc1nn(C)c2c1nc([nH]c2=O)-c1cc(ccc1OCC)S(=O)(=O)N1CCN(C)CC1' },
  { name: 'imatinib', smiles: 'Cc1ccc(NC(=O)c2ccc(CN3CCN(C)CC3)cc2)cc1Nc1nccc(n1)-c1cccnc1' },
  {
    name: 'verapamil',
    smiles: 'COc1ccc(CCN(C)CCC[C@@](C#N)(C(C)C)c2ccc(OC)c(OC)c2)cc1OC',
  },
] as const;

/** The 33-atom drug-like acid of the conformer search. */
export const ibuprofen = benchMolecules[1];
/** The 71-atom molecule of the memory check. */
export const verapamil = benchMolecules[7];
