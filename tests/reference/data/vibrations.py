#!/usr/bin/python3
"""Records harmonic frequencies of MMFF94s minima from RDKit's gradients: an outside Hessian for ours to be compared with.

Run: /usr/bin/python3 vibrations.py   (writes vibrations.json beside itself; a few seconds)
Made with RDKit 2022.09.3, Debian package python3-rdkit, and NumPy. Second derivatives are central differences of
CalcGrad over 1e-3 A, extrapolated with those over 2e-3 A (Richardson), mass-weighted with RDKit's average atomic weights,
or its isotope masses; translations and rotations are projected out; eigenvalues by numpy.linalg.eigvalsh. Minima are
tightened by Newton steps until no component of the gradient exceeds 1e-6 kcal/mol/A.
"""
import json
import pathlib

import numpy
import rdkit
from rdkit import Chem, RDLogger
from rdkit.Chem import AllChem

RDLogger.DisableLog('rdApp.*')

STEP = 1e-3
# name, SMILES, seed of the embedding
MOLECULES = [
    ('ethane', 'CC', 1),
    ('ethane-1,1,1-d3', 'CC([2H])([2H])[2H]', 1),
    ('butane, anti', 'CCCC', 1),
    ('butane, gauche', 'CCCC', None),
    ('acrolein', 'C=CC=O', 1),
    ('N-methylacetamide', 'CNC(C)=O', 1),
    ('propyne', 'CC#C', 1),
]


def gradient_of(mol, properties):
    """The gradient as a function of coordinates, which go through the molecule: CalcGrad(list) of this version is not exact."""
    conformer = mol.GetConformer()

    def gradient(x):
        for atom in range(mol.GetNumAtoms()):
            conformer.SetAtomPosition(atom, x[3 * atom:3 * atom + 3].tolist())
        field = AllChem.MMFFGetMoleculeForceField(mol, properties, nonBondedThresh=1e6)
        field.Initialize()
        return numpy.array(field.CalcGrad())

    return gradient


def hessian_of(gradient, x):
    rows = []
    for a in range(len(x)):
        unit = numpy.zeros(len(x))
        unit[a] = 1
        near = (gradient(x + STEP * unit) - gradient(x - STEP * unit)) / (2 * STEP)
        far = (gradient(x + 2 * STEP * unit) - gradient(x - 2 * STEP * unit)) / (4 * STEP)
        rows.append((4 * near - far) / 3)
    hessian = numpy.array(rows)
    return (hessian + hessian.T) / 2


def rigid_motions(x, masses):
    """Columns span the mass-weighted translations and rotations."""
    places = x.reshape(-1, 3)
    center = (masses[:, None] * places).sum(axis=0) / masses.sum()
    roots = numpy.sqrt(masses)[:, None]
    motions = []
    for axis in numpy.eye(3):
        motions.append((roots * axis).ravel())
        motions.append((roots * numpy.cross(axis, places - center)).ravel())
    left, sizes, _ = numpy.linalg.svd(numpy.array(motions).T, full_matrices=False)
    return left[:, sizes > 1e-3 * sizes[0]]


def frequencies_of(hessian, x, masses):
    weights = numpy.repeat(1 / numpy.sqrt(masses), 3)
    weighted = hessian * weights[:, None] * weights[None, :]
    motions = rigid_motions(x, masses)
    keep = numpy.eye(len(x)) - motions @ motions.T
    values = numpy.linalg.eigvalsh(keep @ weighted @ keep)
    values = sorted(values, key=abs)[motions.shape[1]:]
    # kcal/mol/A^2/(g/mol) to 1/s^2, and angular frequency to wavenumber
    factor = numpy.sqrt(4184 * 1e20 * 1e3) / (2 * numpy.pi * 2.99792458e10)
    return sorted(float(numpy.sign(v) * numpy.sqrt(abs(v)) * factor) for v in values)


def prepare(smiles, seed):
    mol = Chem.AddHs(Chem.MolFromSmiles(smiles))
    if seed is not None:
        AllChem.EmbedMolecule(mol, randomSeed=seed)
        return mol
    for attempt in range(1, 100):
        AllChem.EmbedMolecule(mol, randomSeed=attempt)
        AllChem.MMFFOptimizeMolecule(mol, mmffVariant='MMFF94s', maxIters=5000)
        turn = Chem.rdMolTransforms.GetDihedralDeg(mol.GetConformer(), 0, 1, 2, 3)
        if abs(abs(turn) - 65) < 10:
            return mol
    raise RuntimeError('no gauche form')


def record(name, smiles, seed):
    mol = prepare(smiles, seed)
    properties = AllChem.MMFFGetMoleculeProperties(mol, mmffVariant='MMFF94s')
    AllChem.MMFFOptimizeMolecule(mol, mmffVariant='MMFF94s', maxIters=10000)
    gradient = gradient_of(mol, properties)
    x = numpy.array(mol.GetConformer().GetPositions()).ravel()
    for _ in range(20):
        if abs(gradient(x)).max() < 1e-6:
            break
        motions = rigid_motions(x, numpy.ones(len(x) // 3))
        lifted = hessian_of(gradient, x) + 1e4 * motions @ motions.T
        x = x - numpy.linalg.solve(lifted, gradient(x))
    assert abs(gradient(x)).max() < 1e-6, (name, abs(gradient(x)).max())
    masses = numpy.array([atom.GetMass() for atom in mol.GetAtoms()])
    frequencies = frequencies_of(hessian_of(gradient, x), x, masses)
    conformer = mol.GetConformer()
    for atom in range(mol.GetNumAtoms()):
        conformer.SetAtomPosition(atom, x[3 * atom:3 * atom + 3].tolist())
    return {
        'name': name,
        'smiles': smiles,
        'molfile': Chem.MolToMolBlock(mol),
        'coordinates': [round(float(value), 9) for value in x],
        'frequencies': [round(value, 3) for value in frequencies],
    }


if __name__ == '__main__':
    out = pathlib.Path(__file__).with_suffix('.json')
    meta = {'rdkit': rdkit.__version__, 'numpy': numpy.__version__, 'units': 'coordinates A, frequencies 1/cm'}
    molecules = [record(*each) for each in MOLECULES]
    out.write_text(json.dumps({'meta': meta, 'molecules': molecules}, indent=1) + '\n')
