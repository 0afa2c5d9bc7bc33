import { writeFileSync } from 'node:fs';
import { generateDataSets } from './generate-data-sets';

writeFileSync(new URL('./data-sets.csv', import.meta.url), generateDataSets());
