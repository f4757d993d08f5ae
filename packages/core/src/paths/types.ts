/** A scattering path: the route of the photoelectron from the absorber over neighbours and back. */
export interface Path {
  /** Vertices as indices into Site.atoms, starting with the absorber 0; the closing return to 0 is not repeated. */
  readonly vertices: readonly number[];
  /** Number of legs = vertices.length (2: single scattering). */
  readonly legs: number;
  /** Half of the whole route, Å. */
  readonly halfLength: number;
  /** Number of symmetry-equal and time-reversed routes this one stands for; those over partly occupied atoms count in part. */
  readonly degeneracy: number;
  /** Every route of the group, each as vertices, `vertices` among them; one direction of each. */
  readonly members: readonly (readonly number[])[];
}
