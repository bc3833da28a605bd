#!/usr/bin/python3
"""Records the lowest MMFF94s energy among 300 RDKit conformers (ETKDG, then minimized) of varied molecules.

Run: /usr/bin/python3 conformer-lowest.py   (writes conformer-lowest.json beside itself; ten minutes)
Made with RDKit 2022.09.3, Debian package python3-rdkit. Energies in kcal/mol; seconds are those of embedding and
minimizing on one core of the machine that ran it.
"""
import json
import pathlib
import time

import rdkit
from rdkit import Chem
from rdkit.Chem import AllChem

CONFORMERS = 300
MOLECULES = [
    ('butane', 'CCCC'),
    ('decane', 'CCCCCCCCCC'),
    ('ibuprofen', 'CC(C)Cc1ccc(cc1)[C@@H](C)C(=O)O'),
    ('aspirin', 'CC(=O)Oc1ccccc1C(=O)O'),
    ('paracetamol', 'CC(=O)Nc1ccc(O)cc1'),
    ('beta-D-glucose', 'OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O'),
    ('sucrose', 'OC[C@H]1O[C@@](CO)(O[C@H]2O[C@H](CO)[C@@H](O)[C@H](O)[C@H]2O)[C@@H](O)[C@@H]1O'),
    ('alanine dipeptide', 'CC(=O)N[C@@H](C)C(=O)NC'),
    ('tyrosylglycylglycine', 'N[C@@H](Cc1ccc(O)cc1)C(=O)NCC(=O)NCC(=O)O'),
    ('phenylalanine zwitterion', '[NH3+][C@@H](Cc1ccccc1)C(=O)[O-]'),
    ('dopamine cation', '[NH3+]CCc1ccc(O)c(O)c1'),
    ('citric acid', 'OC(=O)CC(O)(CC(=O)O)C(=O)O'),
    ('adenosine monophosphate dianion',
     'Nc1ncnc2c1ncn2[C@@H]1O[C@H](COP(=O)([O-])[O-])[C@@H](O)[C@H]1O'),
    ('sildenafil', 'CCCc1nn(C)c2c1nc([nH]c2=O)-c1cc(ccc1OCC)S(=O)(=O)N1CCN(C)CC1'),
    ('imatinib', 'Cc1ccc(cc1Nc1nccc(n1)-c1cccnc1)NC(=O)c1ccc(cc1)CN1CCN(C)CC1'),
    ('enalapril', 'CCOC(=O)[C@H](CCc1ccccc1)N[C@@H](C)C(=O)N1CCC[C@H]1C(=O)O'),
    ('penicillin G', 'CC1(C)S[C@@H]2[C@H](NC(=O)Cc3ccccc3)C(=O)N2[C@H]1C(=O)O'),
    ('menthol', 'C[C@@H]1CC[C@H]([C@@H](C1)O)C(C)C'),
    ('testosterone', 'C[C@]12CC[C@H]3[C@@H](CCC4=CC(=O)CC[C@]34C)[C@@H]1CC[C@@H]2O'),
    ('fluoxetine', 'CNCC[C@@H](Oc1ccc(cc1)C(F)(F)F)c1ccccc1'),
    ('sulfamethoxazole', 'Cc1cc(NS(=O)(=O)c2ccc(N)cc2)no1'),
    ('cocaine', 'COC(=O)[C@H]1[C@@H](OC(=O)c2ccccc2)C[C@@H]2CC[C@H]1N2C'),
    ('retinal', 'CC1=C(C(C)(C)CCC1)/C=C/C(C)=C/C=C/C(C)=C/C=O'),
    ('muscone', 'C[C@@H]1CCCCCCCCCCCCC(=O)C1'),
    ('cyclododecane', 'C1CCCCCCCCCCC1'),
    ('cyclotetraglycine', 'O=C1CNC(=O)CNC(=O)CNC(=O)CN1'),

]


def lowest(name, smiles):
    mol = Chem.AddHs(Chem.MolFromSmiles(smiles))
    start = time.perf_counter()
    AllChem.EmbedMultipleConfs(mol, CONFORMERS, randomSeed=1)
    results = AllChem.MMFFOptimizeMoleculeConfs(mol, mmffVariant='MMFF94s', maxIters=2000)
    seconds = time.perf_counter() - start
    energies = [energy for _, energy in results]
    record = {'name': name, 'smiles': smiles, 'atoms': mol.GetNumAtoms(), 'conformers': len(energies),
              'lowest': round(min(energies), 6), 'seconds': round(seconds, 2)}
    print(record, flush=True)
    return record


def main():
    content = {
        'meta': {'source': f'RDKit {rdkit.__version__} (Debian python3-rdkit), conformer-lowest.py',
                 'model': 'MMFF94s', 'units': 'kcal/mol'},
        'molecules': [lowest(*entry) for entry in MOLECULES],
    }
    pathlib.Path(__file__).with_suffix('.json').write_text(json.dumps(content, indent=1) + '\n')


main()
