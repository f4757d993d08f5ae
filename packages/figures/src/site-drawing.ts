/**
 * The coordination site as a flat drawing: the absorber in the middle, its neighbours where they stand in projection, near atoms
 * over far ones, bonds as thick as the neighbour's share of the signal, distances beside the atoms.
 *
 * The direction of view is the one of a fixed set in which the discs keep farthest apart; ties go to the earlier direction, so the
 * same site is always drawn alike.
 */
import { elementColour } from './element-colours.js';
import { fixed, frame, GROUND, INK, QUIET, text, toneOf, WIDTH, widthOf } from './frame.js';

export interface DrawnAtom {
  readonly element: string;
  readonly label: string;
  /** Å, any common axes. */
  readonly position: readonly [number, number, number];
  /** Drawn with its distance, and, if given, its share of the signal. */
  readonly isNeighbour: boolean;
  /** 0 … 1 */
  readonly share?: number;
  readonly occupancy?: number;
}

export interface SiteDrawing {
  readonly absorber: DrawnAtom;
  readonly atoms: readonly DrawnAtom[];
  /** Indices into `atoms`, −1 for the absorber. */
  readonly bonds: readonly (readonly [number, number])[];
  readonly caption?: string;
}

type Vec3 = readonly [number, number, number];
const DIRECTIONS = 240;
const SIDE = 380;
const ABSORBER_RADIUS = 19;
const NEIGHBOUR_RADIUS = 15;
const OTHER_RADIUS = 9;
const LABEL = 14;

/** @throws {RangeError} no atoms beside the absorber */
export function siteDrawing({ absorber, atoms, bonds, caption = '' }: SiteDrawing): string {
  if (atoms.length === 0) throw new RangeError('siteDrawing: a neighbour at least is wanted');
  const relative = atoms.map(({ position }) => position.map((v, a) => v - absorber.position[a]!) as unknown as Vec3);
  const view = bestView(relative, atoms);
  const placed = relative.map((p) => [dot(view[0], p), -dot(view[1], p), dot(view[2], p)] as Vec3);
  const reachX = Math.max(...placed.map(([x]) => Math.abs(x)), 0.5);
  const reachY = Math.max(...placed.map(([, y]) => Math.abs(y)), 0.5);
  const scale = Math.min((WIDTH / 2 - 62) / reachX, (SIDE / 2 - 34) / reachY, 120);
  const height = Math.min(SIDE, 2 * (reachY * scale + 34)) + (caption ? 26 : 0);
  const centre: readonly [number, number] = [WIDTH / 2, (height - (caption ? 26 : 0)) / 2];
  const at = (i: number): Vec3 =>
    i < 0 ? [centre[0], centre[1], 0] : [centre[0] + scale * placed[i]![0], centre[1] + scale * placed[i]![1], placed[i]![2]];
  const deepest = Math.min(0, ...placed.map(([, , z]) => z));
  const nearest = Math.max(0, ...placed.map(([, , z]) => z));
  /** 1 for the nearest atom, 0.7 for the farthest. */
  const presence = (z: number): number => 0.7 + (0.3 * (z - deepest)) / (nearest - deepest || 1);
  const radiusOf = (i: number): number => (i < 0 ? ABSORBER_RADIUS : atoms[i]!.isNeighbour ? NEIGHBOUR_RADIUS : OTHER_RADIUS);
  const most = Math.max(...atoms.map(({ share = 0 }) => share), 1e-9);

  const pieces: { readonly z: number; readonly drawn: string }[] = [];
  for (const [a, b] of bonds) {
    const [p, q] = [at(a), at(b)];
    const own = a < 0 ? atoms[b] : b < 0 ? atoms[a] : undefined;
    const weight = own ? 3 + 8 * ((own.share ?? 0) / most) : 2;
    const z = (p[2] + q[2]) / 2;
    const length = Math.hypot(q[0] - p[0], q[1] - p[1]);
    const [ra, rb] = [radiusOf(a), radiusOf(b)];
    // A bond that points at the reader hides behind its own discs.
    if (length <= ra + rb) continue;
    const along = (from: number): [number, number] => [p[0] + ((q[0] - p[0]) * from) / length, p[1] + ((q[1] - p[1]) * from) / length];
    const [start, end] = [along(ra), along(length - rb)];
    pieces.push({
      z: z - 0.05,
      drawn: `<line class="bond" x1="${fixed(start[0])}" y1="${fixed(start[1])}" x2="${fixed(end[0])}" y2="${fixed(end[1])}" stroke="${own ? toneOf(0) : QUIET}" stroke-width="${fixed(weight)}" stroke-opacity="${fixed(presence(z))}"/>`,
    });
  }
  const disc = (atom: DrawnAtom, [x, y, z]: Vec3, radius: number, strong: boolean): string => {
    const colour = elementColour(atom.element);
    const fade = presence(z);
    return `<g class="atom"><circle cx="${fixed(x)}" cy="${fixed(y)}" r="${radius}" fill="${GROUND}"/><circle cx="${fixed(x)}" cy="${fixed(y)}" r="${radius}" fill="${colour}" fill-opacity="${fixed(strong ? fade : 0.6 * fade)}" stroke="${colour}" stroke-width="1.5"/>${radius > 12 ? text(x, y, atom.element, { anchor: 'middle', fill: '#ffffff', size: LABEL, bold: true }) : ''}</g>`;
  };
  pieces.push({ z: 0, drawn: disc(absorber, at(-1), ABSORBER_RADIUS, true) });
  atoms.forEach((atom, i) => {
    pieces.push({ z: at(i)[2], drawn: disc(atom, at(i), radiusOf(i), atom.isNeighbour) });
  });
  pieces.sort((a, b) => a.z - b.z);
  const labels = placeLabels(atoms, relative, at, centre, height - (caption ? 26 : 0));
  return frame({ name: 'site', description: describe(absorber, atoms, relative), width: WIDTH, height }, [
    ...pieces.map(({ drawn }) => drawn),
    ...labels,
    caption ? text(WIDTH / 2, height - 12, caption, { anchor: 'middle', size: LABEL, fill: QUIET }) : '',
  ]);
}

/** Distance, and share where known, outside each neighbour's disc, moved apart where two would cover one another. */
function placeLabels(
  atoms: readonly DrawnAtom[],
  relative: readonly Vec3[],
  at: (i: number) => Vec3,
  [cx, cy]: readonly [number, number],
  height: number,
): string[] {
  const boxes: { x: number; y: number; half: number }[] = [];
  const discs = [...atoms.keys(), -1].map((i) => ({
    x: at(i)[0],
    y: at(i)[1],
    r: i < 0 ? ABSORBER_RADIUS : atoms[i]!.isNeighbour ? NEIGHBOUR_RADIUS : OTHER_RADIUS,
  }));
  return atoms.flatMap((atom, i) => {
    if (!atom.isNeighbour) return [];
    const [x, y] = at(i);
    const part = atom.share === undefined ? '' : ` (${Math.round(100 * atom.share)} %)`;
    const words = `${Math.hypot(...relative[i]!).toFixed(2)} Å${part}`;
    const half = widthOf(words, LABEL) / 2;
    const outward = Math.atan2(y - cy, x - cx);
    // The first place on a ring round the atom, outward first, that covers no disc and no other label; else the least covered.
    let best = { cost: Number.POSITIVE_INFINITY, x, y };
    for (let step = 0; step < 24; step++) {
      const angle = outward + (step % 2 ? 1 : -1) * Math.ceil(step / 2) * (Math.PI / 12);
      const place = {
        x: Math.min(Math.max(x + Math.cos(angle) * (NEIGHBOUR_RADIUS + 4 + half), half + 2), WIDTH - half - 2),
        y: Math.min(Math.max(y + Math.sin(angle) * (NEIGHBOUR_RADIUS + 13), 9), height - 9),
      };
      let cost = 0.2 * step;
      for (const box of boxes)
        cost += 12 * Math.max(0, box.half + half + 4 - Math.abs(box.x - place.x)) * (Math.abs(box.y - place.y) < 16 ? 1 : 0);
      for (const { x: dx, y: dy, r } of discs) {
        const away = Math.hypot(Math.max(0, Math.abs(dx - place.x) - half), Math.max(0, Math.abs(dy - place.y) - 7));
        cost += 3 * Math.max(0, r + 1 - away);
      }
      if (cost < best.cost) best = { cost, ...place };
    }
    boxes.push({ x: best.x, y: best.y, half });
    const halo = `<rect x="${fixed(best.x - half)}" y="${fixed(best.y - 8)}" width="${fixed(2 * half)}" height="16" rx="3" fill="${GROUND}" fill-opacity="0.75"/>`;
    return [halo + text(best.x, best.y, words, { anchor: 'middle', size: LABEL, fill: INK })];
  });
}

function describe(absorber: DrawnAtom, atoms: readonly DrawnAtom[], relative: readonly Vec3[]): string {
  const list = atoms.flatMap(({ isNeighbour, label }, i) =>
    isNeighbour ? [`${label} at ${Math.hypot(...relative[i]!).toFixed(2)} Å`] : [],
  );
  return `Site of ${absorber.label}: ${list.join(', ')}`;
}

const dot = (a: Vec3, b: Vec3): number => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];
const cross = (a: Vec3, b: Vec3): Vec3 => [a[1] * b[2] - a[2] * b[1], a[2] * b[0] - a[0] * b[2], a[0] * b[1] - a[1] * b[0]];
const unit = (a: Vec3): Vec3 => {
  const length = Math.hypot(...a);
  return [a[0] / length, a[1] / length, a[2] / length];
};

/** Rows: right, up, toward the reader. */
function bestView(relative: readonly Vec3[], atoms: readonly DrawnAtom[]): readonly [Vec3, Vec3, Vec3] {
  let best: { score: number; toward: Vec3 } | undefined;
  for (let i = 0; i < DIRECTIONS; i++) {
    // Fibonacci points over half the sphere: the other half shows the same picture from behind.
    const z = 1 - (i + 0.5) / DIRECTIONS;
    const angle = i * Math.PI * (3 - Math.sqrt(5));
    const toward: Vec3 = [Math.sqrt(1 - z * z) * Math.cos(angle), Math.sqrt(1 - z * z) * Math.sin(angle), z];
    const score = crowding(relative, atoms, toward);
    if (!best || score < best.score - 1e-9) best = { score, toward };
  }
  const { toward } = best!;
  // Turned in the plane so that the widest spread lies across the page.
  const helper: Vec3 = Math.abs(toward[2]) < 0.9 ? [0, 0, 1] : [1, 0, 0];
  const u = unit(cross(helper, toward));
  const v = cross(toward, u);
  let [uu, uv, vv] = [0, 0, 0];
  for (const p of relative) {
    uu += dot(u, p) ** 2;
    uv += dot(u, p) * dot(v, p);
    vv += dot(v, p) ** 2;
  }
  const turn = 0.5 * Math.atan2(2 * uv, uu - vv);
  const right = u.map((value, a) => value * Math.cos(turn) + v[a]! * Math.sin(turn)) as unknown as Vec3;
  return [right, cross(toward, right), toward];
}

/** Sum over pairs of how much nearer than 1.1 Å they come in projection, neighbours weighing most. */
function crowding(relative: readonly Vec3[], atoms: readonly DrawnAtom[], toward: Vec3): number {
  const flat = [[0, 0, 0] as Vec3, ...relative].map((p) => {
    const along = dot(p, toward);
    return p.map((value, a) => value - along * toward[a]!) as unknown as Vec3;
  });
  let sum = 0;
  for (let i = 0; i < flat.length; i++) {
    for (let j = i + 1; j < flat.length; j++) {
      const apart = Math.hypot(flat[i]![0] - flat[j]![0], flat[i]![1] - flat[j]![1], flat[i]![2] - flat[j]![2]);
      const weight = (i === 0 || atoms[i - 1]!.isNeighbour ? 1 : 0.3) * (atoms[j - 1]!.isNeighbour ? 1 : 0.3);
      if (apart < 1.1) sum += weight * (1.1 - apart) ** 2;
    }
  }
  return sum;
}
