/** Every test file starts with openchemlib's tables registered, as every program does. */
import { registerChemistryResources } from '$lib/server/chemistry-resources';

registerChemistryResources();
