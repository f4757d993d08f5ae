/** A prediction: its curves, its shells, what is to be known. Draws; computes nothing. */
import type { Prediction } from '@ringtrue/core';
import { chiInK, chiInR } from '@ringtrue/figures';
import { css, html, LitElement, nothing, type TemplateResult } from 'lit';
import { customElement, property } from 'lit/decorators.js';
import { unsafeSVG } from 'lit/directives/unsafe-svg.js';

@customElement('rt-prediction-view')
export class PredictionView extends LitElement {
  @property({ attribute: false }) prediction?: Prediction;

  protected override render(): TemplateResult | typeof nothing {
    const { prediction } = this;
    if (!prediction) return nothing;
    const { structure, absorbers, shells, warnings, timing } = prediction;
    return html`
      <h2>${structure.file}</h2>
      <p class="quiet">
        ${structure.title ? html`${structure.title} · ` : nothing}${absorbers.length} absorbing
        ${absorbers.length === 1 ? 'site' : 'sites'} of ${prediction.options.absorber} · computed in ${timing.total.toFixed(2)} s
      </p>
      <div class="figures">
        <figure>
          ${unsafeSVG(chiInK(prediction))}
          <figcaption>Line: the prediction. Bands: 68 % and 95 % of what it may be, before any data are seen.</figcaption>
        </figure>
        <figure>${unsafeSVG(chiInR(prediction))}</figure>
      </div>
      <div class="scroll" tabindex="0" role="region" aria-label="Shells">
        <table>
          <thead>
            <tr>
              <th scope="col">Shell</th>
              <th scope="col">N</th>
              <th scope="col">mean R (Å)</th>
              <th scope="col">thermal σ² (Å²)</th>
              <th scope="col">static σ² (Å²)</th>
              <th scope="col">share</th>
            </tr>
          </thead>
          <tbody>
            ${shells.map(
              ({ label, count, meanDistance, sigma2, share }) => html`<tr>
                <th scope="row">${label}</th>
                <td>${count.toFixed(1)}</td>
                <td>${meanDistance.toFixed(4)}</td>
                <td>${sigma2.thermal.toFixed(5)}</td>
                <td>${sigma2.static.toFixed(5)}</td>
                <td>${(100 * share).toFixed(1)} %</td>
              </tr>`,
            )}
          </tbody>
        </table>
      </div>
      ${warnings.length ? html`<ul class="notes">${warnings.map(({ message }) => html`<li>${message}</li>`)}</ul>` : nothing}
    `;
  }

  static override styles = css`
    :host { display: block; }
    h2 { font-size: 1.15rem; margin: 0; overflow-wrap: anywhere; }
    p { margin: 0.2rem 0; }
    .quiet { color: var(--quiet); }
    .figures { display: grid; grid-template-columns: repeat(auto-fit, minmax(min(24rem, 100%), 1fr)); gap: 1rem; margin: 0.75rem 0; }
    figure { margin: 0; padding: 0.5rem; background: var(--panel); border: 1px solid var(--rule); border-radius: 6px; }
    figcaption { color: var(--quiet); font-size: 0.85rem; }
    svg { display: block; width: 100%; height: auto; }
    .scroll { overflow-x: auto; }
    .scroll:focus-visible { outline: 2px solid var(--accent); outline-offset: 2px; }
    table { border-collapse: collapse; width: 100%; font-variant-numeric: tabular-nums; }
    th, td { padding: 0.3rem 0.6rem; text-align: right; border-bottom: 1px solid var(--rule); font-weight: 400; white-space: nowrap; }
    thead th { color: var(--quiet); }
    th:first-child { text-align: left; }
    .notes { color: var(--quiet); padding-left: 1.1rem; }
  `;
}
