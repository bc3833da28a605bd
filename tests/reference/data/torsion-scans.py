#!/usr/bin/python3
"""Records relaxed MMFF94s torsion scans as RDKit computes them: the best it finds from several starts.

Run: /usr/bin/python3 torsion-scans.py   (writes torsion-scans.json beside itself; some minutes)
Made with RDKit 2022.09.3, Debian package python3-rdkit. Per grid angle: the lowest energy over all starts and over
sweeps in both directions, each point started from the one before it, as it is and slightly shaken. Restraint
100 kcal/mol/deg^2 (with 1000 and more RDKit's minimizer stalls); energies in kcal/mol without the restraint.
"""
import json
import pathlib
import random
import sys

import rdkit
from rdkit import Chem, RDLogger
from rdkit.Chem import AllChem, rdMolTransforms

RDLogger.DisableLog('rdApp.*')

STEP = 15
FORCE = 100.0
GRID = list(range(-180 + STEP, 181, STEP))

# name, SMILES, SMARTS of the torsion (four mapped atoms in order), number of starts
SCANS = [
    ('ethane', 'CC', '[H]CC[H]', 2),
    ('butane', 'CCCC', 'CCCC', 4),
    ('buta-1,3-diene', 'C=CC=C', 'C=CC=C', 4),
    ('acrolein', 'C=CC=O', 'C=CC=O', 4),
    ('styrene', 'C=Cc1ccccc1', 'C=Ccc', 4),
    ("2,2'-bithiophene", 'c1ccsc1-c1cccs1', 's:c-c:s', 6),
    ('biphenyl', 'c1ccc(cc1)-c1ccccc1', 'cc-cc', 6),
    ('N-methylacetamide', 'CNC(C)=O', 'CNC(C)', 6),
    ("2,2'-dimethylbiphenyl", 'Cc1ccccc1-c1ccccc1C', '[cH0](C)c-c[cH0](C)', 12),
]


def field_of(mol, properties, restraint=None):
    field = AllChem.MMFFGetMoleculeForceField(mol, properties, nonBondedThresh=1e6)
    field.Initialize()
    if restraint:
        atoms, angle = restraint
        field.MMFFAddTorsionConstraint(*atoms, False, angle, angle, FORCE)
    return field


def relax(mol, properties, atoms, angle):
    """Minimizes under the restraint in place; returns the energy without it and the angle reached."""
    field = field_of(mol, properties, (atoms, angle))
    for _ in range(5):
        if field.Minimize(maxIts=2000, forceTol=1e-5, energyTol=1e-9) == 0:
            break
    energy = field_of(mol, properties).CalcEnergy()
    return energy, rdMolTransforms.GetDihedralDeg(mol.GetConformer(), *atoms)


def off(angle, target):
    return abs((angle - target + 180) % 360 - 180)


def shake(mol, chance, size):
    conformer = mol.GetConformer()
    for i in range(mol.GetNumAtoms()):
        p = conformer.GetAtomPosition(i)
        p.x, p.y, p.z = (c + chance.gauss(0, size) for c in (p.x, p.y, p.z))
        conformer.SetAtomPosition(i, p)


def scan(name, smiles, smarts, starts):
    mol = Chem.AddHs(Chem.MolFromSmiles(smiles))
    pattern = Chem.MolFromSmarts(smarts)
    if name.startswith("2,2'-dimethyl"):
        match = mol.GetSubstructMatch(pattern)
        atoms = [match[0], match[2], match[3], match[4]]
    else:
        atoms = list(mol.GetSubstructMatch(pattern))
    assert len(atoms) == 4, (name, atoms)
    properties = AllChem.MMFFGetMoleculeProperties(mol, mmffVariant='MMFF94s')
    ids = AllChem.EmbedMultipleConfs(mol, starts, randomSeed=7)
    AllChem.MMFFOptimizeMoleculeConfs(mol, mmffVariant='MMFF94s', maxIters=2000)
    chance = random.Random(7)
    best = {}

    def visit(work, angle):
        """The better of the geometry at hand and the same slightly shaken, both relaxed; kept in `work`."""
        plain = Chem.Mol(work)
        shaken = Chem.Mol(work)
        shake(shaken, chance, 0.05)
        found = []
        for candidate in (plain, shaken):
            rdMolTransforms.SetDihedralDeg(candidate.GetConformer(), *atoms, float(angle))
            energy, reached = relax(candidate, properties, atoms, float(angle))
            if off(reached, angle) < 0.01:
                found.append((energy, reached, candidate))
        if not found:
            return work
        energy, reached, kept = min(found, key=lambda entry: entry[0])
        if angle not in best or energy < best[angle][0]:
            best[angle] = (energy, reached)
        return kept

    for id_ in ids:
        first = Chem.Mol(mol)
        conformer = Chem.Conformer(mol.GetConformer(id_))
        first.RemoveAllConformers()
        first.AddConformer(conformer, assignId=True)
        at = rdMolTransforms.GetDihedralDeg(first.GetConformer(), *atoms)
        nearest = min(range(len(GRID)), key=lambda n: off(GRID[n], at))
        for direction in (1, -1):
            work = Chem.Mol(first)
            for n in range(len(GRID) + 1):
                work = visit(work, GRID[(nearest + direction * n) % len(GRID)])
    assert sorted(best) == GRID, (name, sorted(best))
    lowest = min(energy for energy, _ in best.values())
    print(f'{name:24} atoms {atoms} min {lowest:.4f} max {max(e for e, _ in best.values()) - lowest:.4f}', flush=True)
    mol.SetProp('_Name', name)
    flat = Chem.Mol(mol)
    keep = Chem.Conformer(mol.GetConformer(ids[0]))
    flat.RemoveAllConformers()
    flat.AddConformer(keep, assignId=True)
    return {
        'name': name,
        'smiles': smiles,
        'torsion': atoms,
        'molfile': Chem.MolToMolBlock(flat),
        'points': [
            {'angle': a, 'energy': round(best[a][0], 6), 'reached': round(best[a][1], 4)} for a in GRID
        ],
    }


def main():
    content = {
        'meta': {
            'source': f'RDKit {rdkit.__version__} (Debian python3-rdkit), torsion-scans.py',
            'units': 'kcal/mol, degrees',
            'model': 'MMFF94s, relaxed, energies without the restraint',
        },
        'scans': [scan(*entry) for entry in SCANS if not sys.argv[1:] or entry[0] in sys.argv[1:]],
    }
    if not sys.argv[1:]:
        pathlib.Path(__file__).with_suffix('.json').write_text(json.dumps(content) + '\n')


main()
