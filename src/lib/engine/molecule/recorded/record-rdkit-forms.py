"""Records one molecule in many forms, as RDKit writes them, with numbers RDKit gives for it.

Run with a Python that has RDKit; writes rdkit-forms.json beside itself. Every form of an entry is the same molecule,
so a reader must give the same canonical SMILES and configuration for all of them.
"""
import json
import os
import random

import rdkit
from rdkit import Chem
from rdkit.Chem import AllChem, Descriptors, rdMolDescriptors

MOLECULES = {
    "alanine": "C[C@H](N)C(=O)O",
    "threonine zwitterion": "C[C@@H](O)[C@H]([NH3+])C(=O)[O-]",
    "meso-tartaric acid": "O[C@@H]([C@H](O)C(=O)O)C(=O)O",
    "glucose": "OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O",
    "cis-4-methylcyclohexanol": "C[C@H]1CC[C@@H](O)CC1",
    "trans-decalin": "C1CC[C@H]2CCCC[C@@H]2C1",
    "camphor": "CC1(C)[C@@H]2CC[C@@]1(C)C(=O)C2",
    "menthol": "C[C@@H]1CC[C@@H](C(C)C)[C@H](O)C1",
    "methyl sulfoxide": "CC[S@@](C)=O",
    "phosphine oxide": "CC[P@](C)(=O)c1ccccc1",
    "ammonium": "CC[N@@+](C)(CCC)Cc1ccccc1",
    "hexadiene": "C/C=C/C=C\\C",
    "fluorochlorobromoethene": "F/C(Br)=C/Cl",
    "butanone oxime": "CC/C(C)=N/O",
    "azobenzene": "c1ccc(/N=N\\c2ccccc2)cc1",
    "deuterated ethanol": "C[C@H]([2H])O",
    "nitrobenzoate": "O=C([O-])c1cccc([N+](=O)[O-])c1",
    "penicillin G": "CC1(C)S[C@@H]2[C@H](NC(=O)Cc3ccccc3)C(=O)N2[C@H]1C(=O)O",
    "quinine": "C=C[C@H]1CN2CC[C@H]1C[C@H]2[C@H](O)c1ccnc2ccc(OC)cc12",
    "testosterone": "C[C@]12CC[C@H]3[C@@H](CCC4=CC(=O)CC[C@@]43C)[C@@H]1CC[C@@H]2O",
    "azide": "CC[C@H](C)N=[N+]=[N-]",
    "sulfonamide": "C[C@H](NS(=O)(=O)c1ccc(Cl)cc1)C#N",
    "silane": "C[Si@](F)(CC)c1ccccc1",
    "caffeine": "Cn1cnc2c1c(=O)n(C)c(=O)n2C",
    "histidinium": "N[C@@H](Cc1c[nH]c[nH+]1)C(=O)O",
    "pseudoasymmetric triol": "O[C@@H](CO)[C@@H](O)[C@H](O)CO",
    "styrene oxide": "c1ccc([C@@H]2CO2)cc1",
}


def shuffled(molecule, generator):
    order = list(range(molecule.GetNumAtoms()))
    generator.shuffle(order)
    result = Chem.RenumberAtoms(molecule, order)
    Chem.Kekulize(result)
    return result


def record(name, smiles, generator):
    molecule = Chem.MolFromSmiles(smiles)
    full = Chem.AddHs(molecule)
    AllChem.EmbedMolecule(full, randomSeed=1)
    AllChem.Compute2DCoords(molecule)
    drawn = Chem.AddHs(molecule, addCoords=True)
    return {
        "name": name,
        "smiles": [
            smiles,
            Chem.MolToSmiles(molecule, canonical=False, doRandom=True),
            Chem.MolToSmiles(full, canonical=False, doRandom=True),
            Chem.MolToSmiles(shuffled(molecule, generator), kekuleSmiles=True),
        ],
        "drawings": [
            Chem.MolToMolBlock(shuffled(molecule, generator)),
            Chem.MolToV3KMolBlock(shuffled(molecule, generator)),
            Chem.MolToMolBlock(shuffled(drawn, generator)),
        ],
        "geometry": Chem.MolToMolBlock(shuffled(full, generator)),
        "heavyGeometry": Chem.MolToMolBlock(shuffled(Chem.RemoveHs(full), generator)),
        "atoms": full.GetNumAtoms(),
        "formula": rdMolDescriptors.CalcMolFormula(molecule),
        "weight": Descriptors.MolWt(molecule),
        "centers": len(Chem.FindMolChiralCenters(molecule, useLegacyImplementation=False)),
        "doubleBonds": sum(
            bond.GetStereo() > Chem.BondStereo.STEREOANY for bond in molecule.GetBonds()
        ),
    }


def main():
    generator = random.Random(20)
    Chem.rdBase.SeedRandomNumberGenerator(20)
    entries = [record(name, smiles, generator) for name, smiles in MOLECULES.items()]
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "rdkit-forms.json")
    with open(path, "w") as file:
        json.dump({"rdkit": rdkit.__version__, "molecules": entries}, file, indent=1)
        file.write("\n")


main()
