#!/usr/bin/python3
"""Records MMFF94 and MMFF94s energies of randomly distorted molecules as RDKit computes them.

Run: /usr/bin/python3 distorted-geometries.py   (writes distorted-geometries.json beside itself)
Made with RDKit 2022.09.3, Debian package python3-rdkit. Energies in kcal/mol, coordinates in angstrom,
charges in electron charges. No non-bonded cut-off.
"""
import json
import pathlib
import random

import rdkit
from rdkit import Chem, RDLogger
from rdkit.Chem import AllChem

RDLogger.DisableLog('rdApp.*')

MOLECULES = [
    # hydrocarbons, small rings, cumulenes, alkynes
    ('isobutane', 'CC(C)C'),
    ('cyclopropane, vinyl', 'C=CC1CC1'),
    ('cyclobutene', 'C1CC=C1'),
    ('methylenecyclobutane', 'C=C1CCC1'),
    ('cyclopropene', 'C1C=C1'),
    ('bicyclobutane', 'C1C2C1C2'),
    ('allene', 'C=C=C'),
    ('butatriene', 'C=C=C=C'),
    ('2-butyne', 'CC#CC'),
    ('diphenylacetylene', 'c1ccccc1C#Cc1ccccc1'),
    ('vinylacetylene', 'C=CC#C'),
    ('styrene', 'C=Cc1ccccc1'),
    ('azulene', 'c1ccc2cccc2cc1'),
    ('fulvene', 'C=C1C=CC=C1'),
    ('naphthalene', 'c1ccc2ccccc2c1'),
    # oxygen
    ('oxirane, methyl', 'CC1CO1'),
    ('oxetan-3-one', 'O=C1COC1'),
    ('ketene', 'C=C=O'),
    ('carbon suboxide', 'O=C=C=C=O'),
    ('acetic anhydride', 'CC(=O)OC(C)=O'),
    ('methyl peroxide', 'COO'),
    ('furan-2-carboxaldehyde', 'O=Cc1ccco1'),
    ('tropolone', 'O=c1cccccc1O'),
    ('glucose', 'OC[C@H]1O[C@@H](O)[C@H](O)[C@@H](O)[C@@H]1O'),
    ('diethyl carbonate', 'CCOC(=O)OCC'),
    ('phenolate', '[O-]c1ccccc1'),
    ('methoxide', 'C[O-]'),
    ('acetate', 'CC(=O)[O-]'),
    ('benzoate', '[O-]C(=O)c1ccccc1'),
    ('oxonium, dimethyl', 'C[OH+]C'),
    ('protonated acetone', 'CC(C)=[OH+]'),
    ('water', 'O'),
    # nitrogen
    ('nitrobenzene', 'O=[N+]([O-])c1ccccc1'),
    ('nitromethane', 'C[N+](=O)[O-]'),
    ('methyl nitrate', 'CO[N+](=O)[O-]'),
    ('methyl nitrite', 'CON=O'),
    ('nitrosobenzene', 'O=Nc1ccccc1'),
    ('N-nitrosodimethylamine', 'CN(C)N=O'),
    ('methyl azide', 'CN=[N+]=[N-]'),
    ('phenyl azide', 'c1ccccc1N=[N+]=[N-]'),
    ('diazomethane', 'C=[N+]=[N-]'),
    ('benzenediazonium', 'N#[N+]c1ccccc1'),
    ('methyl isocyanide', 'C[N+]#[C-]'),
    ('methyl isocyanate', 'CN=C=O'),
    ('acrylonitrile', 'C=CC#N'),
    ('pyridine N-oxide', '[O-][n+]1ccccc1'),
    ('trimethylamine N-oxide', 'C[N+](C)(C)[O-]'),
    ('nitrone', 'C[N+]([O-])=C'),
    ('azoxybenzene', '[O-][N+](=Nc1ccccc1)c1ccccc1'),
    ('azobenzene', 'c1ccccc1N=Nc1ccccc1'),
    ('acetone oxime', 'CC(C)=NO'),
    ('acetone hydrazone', 'CC(C)=NN'),
    ('hydrazine', 'NN'),
    ('hydroxylamine', 'NO'),
    ('aniline', 'Nc1ccccc1'),
    ('N,N-dimethylaniline', 'CN(C)c1ccccc1'),
    ('enamine', 'CN(C)C=C'),
    ('amidine', 'CC(=N)N'),
    ('guanidine', 'NC(=N)N'),
    ('methylguanidinium', 'CNC(N)=[NH2+]'),
    ('acetamidinium', 'CC(N)=[NH2+]'),
    ('iminium', 'C[NH+]=C(C)C'),
    ('methylammonium', 'C[NH3+]'),
    ('tetramethylammonium', 'C[N+](C)(C)C'),
    ('pyridinium', 'c1cc[nH+]cc1'),
    ('N-methylpyridinium', 'C[n+]1ccccc1'),
    ('imidazolium', 'C[n+]1cc[nH]c1'),
    ('imidazolide', 'c1c[n-]cn1'),
    ('tetrazole', 'Cc1nn[nH]n1'),
    ('2H-tetrazole', 'Cc1nnn(C)n1'),
    ('tetrazolate', 'Cc1nn[n-]n1'),
    ('pyrrolide', 'c1cc[n-]c1'),
    ('1,2,3-triazole, benzyl', 'C(n1ccnn1)c1ccccc1'),
    ('1,2,4-triazole', 'c1nc[nH]n1'),
    ('pyrazole', 'Cc1cc[nH]n1'),
    ('isoxazole', 'Cc1ccno1'),
    ('oxazole', 'c1cocn1'),
    ('1,3,4-oxadiazole', 'Cc1nnc(C)o1'),
    ('furoxan', 'Cc1no[n+]([O-])c1C'),
    ('sydnone', 'C[n+]1cc([O-])on1'),
    ('1,3,5-triazine', 'c1ncncn1'),
    ('pyridazine', 'c1ccnnc1'),
    ('pyrazine N-oxide', '[O-][n+]1ccncc1'),
    ('purine', 'c1ncc2[nH]cnc2n1'),
    ('adenine, 9-methyl', 'Cn1cnc2c(N)ncnc12'),
    ('guanine', 'Nc1nc2[nH]cnc2c(=O)[nH]1'),
    ('uracil', 'O=c1cc[nH]c(=O)[nH]1'),
    ('caffeine', 'Cn1cnc2c1c(=O)n(C)c(=O)n2C'),
    ('indole', 'c1ccc2[nH]ccc2c1'),
    ('indolizine', 'c1ccn2cccc2c1'),
    ('2-pyridone', 'O=c1cccc[nH]1'),
    ('4-aminopyridinium', 'Nc1cc[nH+]cc1'),
    ('aziridine', 'C1CN1'),
    ('azetidinone', 'O=C1CCN1'),
    ('quinuclidinium', 'C1CC2CC[NH+]1CC2'),
    ('urea', 'NC(N)=O'),
    ('N-methylacetamide', 'CNC(C)=O'),
    ('N-phenylacetamide', 'CC(=O)Nc1ccccc1'),
    ('hydroxamic acid', 'CC(=O)NO'),
    ('methyl carbamate', 'COC(N)=O'),
    ('succinimide', 'O=C1CCC(=O)N1'),
    ('cyanamide', 'NC#N'),
    ('carbodiimide', 'CN=C=NC'),
    # zwitterions and peptides
    ('glycine zwitterion', '[NH3+]CC(=O)[O-]'),
    ('alanylglycine zwitterion', 'C[C@H]([NH3+])C(=O)NCC(=O)[O-]'),
    ('betaine', 'C[N+](C)(C)CC(=O)[O-]'),
    ('arginine zwitterion', '[NH3+][C@@H](CCCNC(N)=[NH2+])C(=O)[O-]'),
    ('taurine zwitterion', '[NH3+]CCS(=O)(=O)[O-]'),
    ('histidine dipeptide', 'CC(=O)N[C@@H](Cc1c[nH]cn1)C(=O)NC'),
    ('proline dipeptide', 'CC(=O)N1CCC[C@H]1C(=O)NC'),
    # sulfur
    ('methanethiol', 'CS'),
    ('methanethiolate', 'C[S-]'),
    ('dimethyl disulfide', 'CSSC'),
    ('dimethyl sulfoxide', 'CS(C)=O'),
    ('dimethyl sulfone', 'CS(C)(=O)=O'),
    ('methyl phenyl sulfoxide', 'CS(=O)c1ccccc1'),
    ('divinyl sulfone', 'C=CS(=O)(=O)C=C'),
    ('methanesulfonamide', 'CS(N)(=O)=O'),
    ('benzenesulfonamide', 'NS(=O)(=O)c1ccccc1'),
    ('sulfonamide anion', 'C[N-]S(C)(=O)=O'),
    ('sulfamethoxazole', 'Cc1cc(NS(=O)(=O)c2ccc(N)cc2)no1'),
    ('methanesulfonate', 'CS(=O)(=O)[O-]'),
    ('methanesulfonyl chloride', 'CS(=O)(=O)Cl'),
    ('methanesulfinate', 'CS(=O)[O-]'),
    ('methyl sulfate', 'COS(=O)(=O)[O-]'),
    ('sulfur dioxide', 'O=S=O'),
    ('N-sulfinylaniline', 'O=S=Nc1ccccc1'),
    ('trimethylsulfonium', 'C[S+](C)C'),
    ('thiophene, 2-methyl', 'Cc1cccs1'),
    ("2,2'-bithiophene", 'c1ccsc1-c1cccs1'),
    ('thiazole, 2-amino', 'Nc1nccs1'),
    ('1,2,5-thiadiazole', 'c1cnsn1'),
    ('thiamine core', 'Cc1ncsc1C'),
    ('thiazolium', 'C[n+]1ccsc1'),
    ('thioacetamide', 'CC(N)=S'),
    ('dithioacetate', 'CC(=S)[S-]'),
    ('thioacetone', 'CC(C)=S'),
    ('methyl isothiocyanate', 'CN=C=S'),
    ('methyl thiocyanate', 'CSC#N'),
    ('thiirane', 'C1CS1'),
    ('benzothiophene', 'c1ccc2sccc2c1'),
    ('saccharin', 'O=C1NS(=O)(=O)c2ccccc12'),
    ('penicillin core', 'CC1(C)S[C@@H]2[C@H](NC(C)=O)C(=O)N2[C@H]1C(=O)[O-]'),
    ('S-methyl thioacetate', 'CSC(C)=O'),
    # phosphorus
    ('trimethylphosphine', 'CP(C)C'),
    ('trimethylphosphine oxide', 'CP(C)(C)=O'),
    ('tetramethylphosphonium', 'C[P+](C)(C)C'),
    ('dimethyl phosphate anion', 'COP(=O)([O-])OC'),
    ('methyl phosphate dianion', 'COP(=O)([O-])[O-]'),
    ('trimethyl phosphate', 'COP(=O)(OC)OC'),
    ('trimethyl phosphite', 'COP(OC)OC'),
    ('dimethyl methylphosphonate', 'COP(C)(=O)OC'),
    ('phosphoramide', 'CN(C)P(=O)(N(C)C)N(C)C'),
    ('trimethylphosphine sulfide', 'CP(C)(C)=S'),
    ('phosphaethene', 'C=PC'),
    # silicon
    ('tetramethylsilane', 'C[Si](C)(C)C'),
    ('trimethylsilanol', 'C[Si](C)(C)O'),
    ('hexamethyldisiloxane', 'C[Si](C)(C)O[Si](C)(C)C'),
    ('phenylsilane', '[SiH3]c1ccccc1'),
    ('trimethylsilylacetylene', 'C[Si](C)(C)C#C'),
    # halogens
    ('bromochlorofluoromethane', '[C@H](F)(Cl)Br'),
    ('1,2-dichloroethane', 'ClCCCl'),
    ('iodobenzene', 'Ic1ccccc1'),
    ('trifluoroethanol', 'OCC(F)(F)F'),
    ('vinyl bromide', 'C=CBr'),
    ('perchlorate', '[O-]Cl(=O)(=O)=O'),
    ('acetyl chloride', 'CC(=O)Cl'),
    ('haloperidol fragment', 'O=C(CCCN1CCCCC1)c1ccc(F)cc1'),
    # drug-like
    ('ibuprofen', 'CC(C)Cc1ccc(cc1)[C@@H](C)C(=O)O'),
    ('losartan fragment', 'CCCCc1nc(Cl)c(CO)n1Cc1ccc(cc1)-c1ccccc1-c1nnn[nH]1'),
    ('adenosine monophosphate', 'Nc1ncnc2c1ncn2[C@@H]1O[C@H](COP(=O)([O-])[O-])[C@@H](O)[C@H]1O'),
    ('nicotinium', 'C[NH+]1CCC[C@H]1c1cccnc1'),
    ('chloramphenicol', 'O=C(N[C@H](CO)[C@H](O)c1ccc(cc1)[N+](=O)[O-])C(Cl)Cl'),
    ('diazepam', 'CN1C(=O)CN=C(c2ccccc2)c2cc(Cl)ccc12'),
]

TERMS = {
    'bond': 'SetMMFFBondTerm',
    'angle': 'SetMMFFAngleTerm',
    'stretchBend': 'SetMMFFStretchBendTerm',
    'outOfPlane': 'SetMMFFOopTerm',
    'torsion': 'SetMMFFTorsionTerm',
    'vanDerWaals': 'SetMMFFVdWTerm',
    'electrostatic': 'SetMMFFEleTerm',
}


def energies(mol, variant):
    """Total and per-term energies of the molecule's only conformer, with RDKit's types and charges."""
    def energy(chosen):
        properties = AllChem.MMFFGetMoleculeProperties(mol, mmffVariant=variant)
        for name, switch in TERMS.items():
            getattr(properties, switch)(name in chosen)
        field = AllChem.MMFFGetMoleculeForceField(mol, properties, nonBondedThresh=1e6)
        field.Initialize()
        return field.CalcEnergy()

    properties = AllChem.MMFFGetMoleculeProperties(mol, mmffVariant=variant)
    count = mol.GetNumAtoms()
    return {
        'total': energy(TERMS),
        'terms': {name: energy([name]) for name in TERMS},
        'types': [properties.GetMMFFAtomType(i) for i in range(count)],
        'charges': [round(properties.GetMMFFPartialCharge(i), 6) for i in range(count)],
    }


def distorted(name, smiles, number):
    mol = Chem.AddHs(Chem.MolFromSmiles(smiles))
    if AllChem.EmbedMolecule(mol, randomSeed=17 + number) != 0:
        raise ValueError(f'{name}: no embedding')
    if not AllChem.MMFFHasAllMoleculeParams(mol):
        raise ValueError(f'{name}: no MMFF94 parameters')
    chance = random.Random(1000 + number)
    spread = chance.uniform(0.05, 0.15)
    conformer = mol.GetConformer()
    for i in range(mol.GetNumAtoms()):
        p = conformer.GetAtomPosition(i)
        p.x, p.y, p.z = (round(c + chance.gauss(0, spread), 6) for c in (p.x, p.y, p.z))
        conformer.SetAtomPosition(i, p)
    mol.SetProp('_Name', name)
    return {
        'name': name,
        'smiles': smiles,
        'spread': round(spread, 4),
        'molfile': Chem.MolToMolBlock(mol),
        'coordinates': [c for row in conformer.GetPositions().tolist() for c in row],
        'MMFF94': energies(mol, 'MMFF94'),
        'MMFF94s': energies(mol, 'MMFF94s'),
    }


def main():
    molecules = []
    refused = []
    for number, (name, smiles) in enumerate(MOLECULES):
        try:
            molecules.append(distorted(name, smiles, number))
        except ValueError as error:
            refused.append(str(error))
    content = {
        'meta': {
            'source': f'RDKit {rdkit.__version__} (Debian python3-rdkit), distorted-geometries.py',
            'units': 'kcal/mol, angstrom, electron charges',
            'refusedByRDKit': refused,
        },
        'molecules': molecules,
    }
    path = pathlib.Path(__file__).with_suffix('.json')
    path.write_text(json.dumps(content) + '\n')
    print(len(molecules), 'molecules,', path.stat().st_size, 'bytes; refused:', refused)


main()
