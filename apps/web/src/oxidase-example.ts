/** The invented scenario, fetched when asked for: candidates of the oxidase and its three scans. */
import lowDose from '../../../demo-structures/oxidase-low-dose.cif?raw';
import modelOne from '../../../demo-structures/oxidase-model-one.xyz?raw';
import modelThree from '../../../demo-structures/oxidase-model-three.xyz?raw';
import roomTemperature from '../../../demo-structures/oxidase-room-temperature.pdb?raw';
import scan1 from '../../../demo-structures/oxidase-scan-1.xdi?raw';
import scan2 from '../../../demo-structures/oxidase-scan-2.xdi?raw';
import scan3 from '../../../demo-structures/oxidase-scan-3.xdi?raw';

export const EXAMPLE = {
  candidates: [
    { file: 'oxidase-room-temperature.pdb', text: roomTemperature },
    { file: 'oxidase-low-dose.cif', text: lowDose },
    { file: 'oxidase-model-one.xyz', text: modelOne },
    { file: 'oxidase-model-three.xyz', text: modelThree },
  ],
  scans: [
    { file: 'oxidase-scan-1.xdi', text: scan1 },
    { file: 'oxidase-scan-2.xdi', text: scan2 },
    { file: 'oxidase-scan-3.xdi', text: scan3 },
  ],
} as const;
