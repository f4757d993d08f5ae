/** Element data: symbols, masses (u), covalent radii (Å), edges and core-level widths (eV). */
export { emissionLineEv, massAttenuation, shellAttenuation } from './attenuation.js';
export { type Constituent, parseComposition } from './composition.js';
export {
  coreWidthEv,
  covalentRadius,
  type Element,
  edgeEnergyEv,
  elementByNumber,
  elementBySymbol,
  elementSymbol,
  hasEdge,
} from './elements.js';
