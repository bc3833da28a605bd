#!/usr/bin/python3
"""Records MMFF94s energies of the bound ligands, in the geometries given, as RDKit computes them.

Run: /usr/bin/python3 bound-ligands.py <bound_ligands_100.sdf>   (writes bound-ligands.json beside itself)
Made with RDKit 2022.09.3, Debian package python3-rdkit. Energies in kcal/mol, by record of the file from 0.
"""
import json
import pathlib
import sys

import rdkit
from rdkit import Chem, RDLogger
from rdkit.Chem import AllChem

RDLogger.DisableLog('rdApp.*')


def energy(mol):
    assert Chem.AddHs(mol).GetNumAtoms() == mol.GetNumAtoms(), 'hydrogens are missing'
    properties = AllChem.MMFFGetMoleculeProperties(mol, mmffVariant='MMFF94s')
    field = AllChem.MMFFGetMoleculeForceField(mol, properties, nonBondedThresh=1e6)
    field.Initialize()
    return round(field.CalcEnergy(), 6)


def main():
    energies = [energy(mol) for mol in Chem.SDMolSupplier(sys.argv[1], removeHs=False)]
    content = {
        'meta': {'source': f'RDKit {rdkit.__version__} (Debian python3-rdkit), bound-ligands.py',
                 'model': 'MMFF94s', 'units': 'kcal/mol'},
        'energies': energies,
    }
    pathlib.Path(__file__).with_suffix('.json').write_text(json.dumps(content) + '\n')
    print(len(energies), min(energies), max(energies))


main()
