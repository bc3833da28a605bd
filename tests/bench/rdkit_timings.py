#!/usr/bin/python3
"""RDKit's side of the bench: reads one JSON request on standard input, writes timings and energies as JSON.

Processor time of one thread, taken here, so that the interpreter's start and a busy machine do not count. MMFF94s,
no cut-off that matters.
"""
import json
import sys
import time

import rdkit
from rdkit import Chem
from rdkit.Chem import AllChem

CUTOFF = 1e6
TORSION_FORCE = 100.0  # kcal/mol/deg^2; with 1000 and more the minimizer stalls


def read(molfile):
    return Chem.MolFromMolBlock(molfile, removeHs=False)


def rms(values):
    return (sum(v * v for v in values) / len(values)) ** 0.5


def run_to_end(field):
    # Minimize returns 1 when it wants more iterations.
    for _ in range(20):
        if field.Minimize(maxIts=1000) == 0:
            return


def minimize(request):
    """Free minimizations of several starts, one after the other, with RDKit's own convergence."""
    molecules = [read(molfile) for molfile in request['molfiles']]
    results = []
    for _ in range(request['repeats']):
        setup = work = 0.0
        energies, gradients = [], []
        for molecule in molecules:
            copy = Chem.Mol(molecule)
            start = time.process_time()
            properties = AllChem.MMFFGetMoleculeProperties(copy, mmffVariant='MMFF94s')
            field = AllChem.MMFFGetMoleculeForceField(copy, properties, nonBondedThresh=CUTOFF)
            field.Initialize()
            ready = time.process_time()
            run_to_end(field)
            done = time.process_time()
            setup += ready - start
            work += done - ready
            energies.append(field.CalcEnergy())
            gradients.append(rms(field.CalcGrad()))
        results.append({'setup': setup, 'seconds': work})
    best = min(results, key=lambda entry: entry['seconds'])
    return {**best, 'energies': energies, 'gradientRms': gradients}


def constrained(request):
    """One constrained minimization per start; the start already has the angle. Energies leave the restraint out."""
    starts = [(read(entry['molfile']), entry['angle']) for entry in request['starts']]
    atoms = request['torsion']
    best = None
    for _ in range(request['repeats']):
        seconds = 0.0
        energies, gradients = [], []
        for molecule, angle in starts:
            copy = Chem.Mol(molecule)
            properties = AllChem.MMFFGetMoleculeProperties(copy, mmffVariant='MMFF94s')
            field = AllChem.MMFFGetMoleculeForceField(copy, properties, nonBondedThresh=CUTOFF)
            field.Initialize()
            # RDKit needs a new field for each restraint; ours has none to set up, so only the work counts.
            start = time.process_time()
            field.MMFFAddTorsionConstraint(*atoms, False, angle, angle, TORSION_FORCE)
            run_to_end(field)
            seconds += time.process_time() - start
            gradients.append(rms(field.CalcGrad()))
            energies.append(AllChem.MMFFGetMoleculeForceField(copy, properties, nonBondedThresh=CUTOFF).CalcEnergy())
        best = seconds if best is None else min(best, seconds)
    return {'seconds': best, 'energies': energies, 'gradientRms': gradients}


def conformers(request):
    """Embeds and minimizes an ensemble."""
    molecule = Chem.AddHs(Chem.MolFromSmiles(request['smiles']))
    start = time.process_time()
    AllChem.EmbedMultipleConfs(molecule, request['count'], randomSeed=1)
    embedded = time.process_time()
    results = AllChem.MMFFOptimizeMoleculeConfs(molecule, mmffVariant='MMFF94s', maxIters=2000)
    done = time.process_time()
    return {
        'embedding': embedded - start,
        'seconds': done - start,
        'lowest': min(energy for _, energy in results),
    }


def main():
    request = json.load(sys.stdin)
    task = {'minimize': minimize, 'constrained': constrained, 'conformers': conformers}[request['task']]
    json.dump({'version': rdkit.__version__, **task(request)}, sys.stdout)


main()
