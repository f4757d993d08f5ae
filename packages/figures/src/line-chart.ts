/** Curves over a common axis, one panel. */
import { WIDTH } from './frame.js';
import { type Panel, type PanelChart, panelChart } from './panels.js';

export interface LineChart
  extends Pick<PanelChart, 'xLabel' | 'xDomain' | 'description' | 'marks'>,
    Pick<Panel, 'curves' | 'ribbons' | 'yLabel'> {
  readonly name?: string;
  readonly width?: number;
  /** px, of the plot itself. */
  readonly height?: number;
}

/** @throws {RangeError} a curve whose x and y differ in length */
export function lineChart({ curves, ribbons = [], yLabel, height = 200, width = WIDTH, name = 'lines', ...chart }: LineChart): string {
  return panelChart({ ...chart, name, width, panels: [{ curves, ribbons, yLabel, height }] });
}
