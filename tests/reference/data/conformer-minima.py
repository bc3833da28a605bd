#!/usr/bin/python3
"""Records the lowest MMFF94s energies RDKit finds: ibuprofen's from 600 conformers, and 2-phenylpyridine's free minimum.

Run: /usr/bin/python3 conformer-minima.py   (writes conformer-minima.json beside itself)
Made with RDKit 2022.09.3, Debian package python3-rdkit. Energies in kcal/mol. RDKit leaves 2-phenylpyridine on its
planar saddle when it starts from a planar geometry; both numbers are kept.
"""
import json
import pathlib

import rdkit
from rdkit import Chem
from rdkit.Chem import AllChem

MOLECULES = [
    ('ibuprofen', 'CC(C)Cc1ccc(cc1)[C@@H](C)C(=O)O', 600),
    ('2-phenylpyridine', 'c1ccc(cc1)-c1ccccn1', 50),
]


def minima(name, smiles, count):
    mol = Chem.AddHs(Chem.MolFromSmiles(smiles))
    AllChem.EmbedMultipleConfs(mol, count, randomSeed=1)
    results = AllChem.MMFFOptimizeMoleculeConfs(mol, mmffVariant='MMFF94s', maxIters=5000)
    energies = sorted(energy for _, energy in results)
    print(name, energies[0], energies[-1])
    return {'name': name, 'smiles': smiles, 'conformers': count,
            'lowest': round(energies[0], 6), 'highest': round(energies[-1], 6)}


def main():
    content = {
        'meta': {'source': f'RDKit {rdkit.__version__} (Debian python3-rdkit), conformer-minima.py',
                 'model': 'MMFF94s', 'units': 'kcal/mol'},
        'molecules': [minima(*entry) for entry in MOLECULES],
    }
    pathlib.Path(__file__).with_suffix('.json').write_text(json.dumps(content, indent=1) + '\n')


main()
