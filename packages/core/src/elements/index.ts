/** Element data: symbols, masses (u), covalent radii (Å), edges and core-level widths (eV). */
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
