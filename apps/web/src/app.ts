/** The page: a structure and a few choices on the left, its predicted spectrum beside them. */
import type { Prediction } from '@ringtrue/core';
import { chiInK, chiInR } from '@ringtrue/figures';
import { css, html, LitElement, nothing, type TemplateResult } from 'lit';
import { customElement, state } from 'lit/decorators.js';
import { unsafeSVG } from 'lit/directives/unsafe-svg.js';
import tideglass from '../../../demo-structures/tideglass.cif?raw';
import { Computing } from './computing.js';

interface Candidate {
  readonly file: string;
  readonly text: string;
}

/** Larger files are refused before they are read, bytes. */
const LARGEST_FILE = 100e6;

@customElement('rt-app')
export class App extends LitElement {
  @state() private candidate: Candidate | undefined;
  @state() private absorber = '';
  @state() private edge: 'K' | 'L3' | 'L2' | 'L1' = 'K';
  @state() private thermal: 'debye' | 'springs' = 'debye';
  @state() private temperature = 300;
  @state() private debyeTemperature: number | undefined;
  @state() private radius = 5;
  @state() private running = false;
  @state() private fault: string | undefined;
  @state() private prediction: Prediction | undefined;
  @state() private dropping = false;
  private readonly computing = new Computing();

  protected override render(): TemplateResult {
    return html`
      <header>
        <h1>Ringtrue</h1>
        <p>Does a structure ring true with its EXAFS? Predicted, not fitted. Nothing leaves this machine.</p>
      </header>
      <main>
        <section class="inputs" aria-label="Candidate and conditions">
          ${this.renderDrop()} ${this.renderChoices()}
        </section>
        <section class="result" aria-label="Prediction" aria-live="polite">
          ${this.fault ? html`<p class="fault" role="alert">${this.fault}</p>` : nothing}
          ${this.prediction ? this.renderPrediction(this.prediction) : this.renderEmpty()}
        </section>
      </main>
      <footer>
        Agreement shows consistency; it is no proof of a structure. Work at X-ray sources follows the facility's own
        radiation-safety rules.
      </footer>
    `;
  }

  private renderDrop(): TemplateResult {
    return html`
      <div
        class=${this.dropping ? 'drop over' : 'drop'}
        @dragover=${(event: DragEvent) => {
          event.preventDefault();
          this.dropping = true;
        }}
        @dragleave=${() => {
          this.dropping = false;
        }}
        @drop=${(event: DragEvent) => {
          event.preventDefault();
          this.dropping = false;
          void this.take(event.dataTransfer?.files[0]);
        }}
      >
        <strong>${this.candidate ? this.candidate.file : 'Drop a structure here'}</strong>
        <span>XYZ, PDB, mmCIF or CIF</span>
        <label class="file"
          >Or choose a file
          <input
            type="file"
            @change=${(event: Event) => void this.take((event.target as HTMLInputElement).files?.[0])}
          />
        </label>
        <button type="button" class="plain" @click=${this.showExample}>Show the invented example</button>
      </div>
    `;
  }

  private renderChoices(): TemplateResult {
    const numeric = (
      label: string,
      unit: string,
      value: number | undefined,
      low: number,
      high: number,
      set: (value: number | undefined) => void,
    ) => html`
      <label>
        <span>${label}</span>
        <input
          type="number"
          .value=${value === undefined ? '' : String(value)}
          min=${low}
          max=${high}
          step="any"
          placeholder=${value === undefined ? 'assumed' : ''}
          @change=${(event: Event) => {
            const { value: text } = event.target as HTMLInputElement;
            set(text === '' ? undefined : Number(text));
          }}
        />
        <span class="unit">${unit}</span>
      </label>
    `;
    return html`
      <form
        @submit=${(event: Event) => {
          event.preventDefault();
          void this.run();
        }}
      >
        <label>
          <span>Absorber</span>
          <input
            type="text"
            maxlength="12"
            required
            placeholder="e.g. Fe"
            .value=${this.absorber}
            @change=${(event: Event) => {
              this.absorber = (event.target as HTMLInputElement).value.trim();
            }}
          />
          <span class="unit"></span>
        </label>
        <label>
          <span>Edge</span>
          <select
            @change=${(event: Event) => {
              this.edge = (event.target as HTMLSelectElement).value as typeof this.edge;
            }}
          >
            ${(['K', 'L3', 'L2', 'L1'] as const).map((edge) => html`<option ?selected=${edge === this.edge}>${edge}</option>`)}
          </select>
          <span class="unit"></span>
        </label>
        <label>
          <span>Thermal model</span>
          <select
            @change=${(event: Event) => {
              this.thermal = (event.target as HTMLSelectElement).value as typeof this.thermal;
            }}
          >
            ${(['debye', 'springs'] as const).map((model) => html`<option value=${model} ?selected=${model === this.thermal}>${model === 'debye' ? 'Debye' : 'springs'}</option>`)}
          </select>
          <span class="unit"></span>
        </label>
        ${numeric('Temperature', 'K', this.temperature, 0, 3000, (value) => {
          this.temperature = value ?? 300;
        })}
        ${numeric('Debye temperature', 'K', this.debyeTemperature, 10, 5000, (value) => {
          this.debyeTemperature = value;
        })}
        ${numeric('Radius', 'Å', this.radius, 1, 12, (value) => {
          this.radius = value ?? 5;
        })}
        ${
          this.running
            ? html`<button type="button" @click=${this.cancel}>Cancel</button>`
            : html`<button type="submit" ?disabled=${!this.candidate}>Predict</button>`
        }
      </form>
    `;
  }

  private renderEmpty(): TemplateResult {
    return html`<p class="empty">
      ${
        this.running
          ? 'Computing atoms, potentials and phase shifts …'
          : 'The predicted χ(k) and its transform appear here: drop a structure on the left, name the absorbing element, and press Predict. The invented example needs one press.'
      }
    </p>`;
  }

  private renderPrediction(prediction: Prediction): TemplateResult {
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

  private async take(file: File | undefined): Promise<void> {
    if (!file) return;
    this.cancel();
    this.prediction = undefined;
    if (file.size > LARGEST_FILE) {
      this.candidate = undefined;
      this.fault = `${file.name}: ${Math.round(file.size / 1e6)} MB is more than the ${LARGEST_FILE / 1e6} MB that are read here; cut out the part around the absorber.`;
      return;
    }
    this.fault = undefined;
    this.candidate = { file: file.name, text: await file.text() };
  }

  private readonly showExample = (): void => {
    this.candidate = { file: 'tideglass.cif', text: tideglass };
    this.absorber = 'Mn';
    this.edge = 'K';
    this.temperature = 15;
    this.debyeTemperature = 500;
    void this.run();
  };

  private readonly cancel = (): void => {
    this.computing.cancel();
    this.running = false;
  };

  private async run(): Promise<void> {
    if (!this.candidate) return;
    this.running = true;
    this.fault = undefined;
    this.prediction = undefined;
    const { absorber, edge, thermal, temperature, debyeTemperature, radius } = this;
    const { file, text } = this.candidate;
    const conditions = {
      absorber,
      edge,
      thermal,
      temperature,
      radius,
      bands: true,
      ...(debyeTemperature === undefined ? {} : { debyeTemperature }),
    };
    try {
      const outcome = await this.computing.predict(file, text, conditions);
      if (!outcome) return;
      this.running = false;
      if ('fault' in outcome) this.fault = outcome.fault;
      else this.prediction = outcome.prediction;
    } catch (error) {
      this.running = false;
      this.fault = error instanceof Error ? error.message : String(error);
    }
  }

  static override styles = css`
    :host * {
      box-sizing: border-box;
    }
    :host { display: block; max-width: 1280px; margin: 0 auto; padding: 0 1.25rem; }
    header { display: flex; flex-wrap: wrap; align-items: baseline; gap: 0 1.25rem; padding: 1rem 0; border-bottom: 2px solid var(--accent); }
    h1 { font-size: 1.35rem; font-weight: 650; letter-spacing: 0.01em; margin: 0; }
    h2 { font-size: 1.15rem; margin: 0; overflow-wrap: anywhere; }
    p { margin: 0.2rem 0; }
    header p, .quiet, footer, .unit, .drop span { color: var(--quiet); }
    main { display: grid; grid-template-columns: 19rem minmax(0, 1fr); gap: 1.5rem; padding: 1.25rem 0; }
    @media (max-width: 900px) { main { grid-template-columns: 1fr; } }
    .drop { display: flex; flex-direction: column; gap: 0.5rem; padding: 1rem; border: 1.5px dashed var(--rule); border-radius: 6px; background: var(--panel); }
    .drop strong { overflow-wrap: anywhere; }
    .drop.over { border-color: var(--accent); }
    .file { color: var(--accent); text-decoration: underline; cursor: pointer; }
    .file input { display: block; width: 100%; margin-top: 0.25rem; font: inherit; color: var(--ink); }
    form { display: grid; gap: 0.6rem; margin-top: 1rem; }
    form label { display: grid; grid-template-columns: 1fr 5.5rem 3.6rem; align-items: center; gap: 0.5rem; }
    input, select { font: inherit; color: inherit; background: var(--panel); border: 1px solid var(--rule); border-radius: 4px; padding: 0.3rem 0.45rem; min-width: 0; }
    button { font: inherit; font-weight: 600; padding: 0.5rem 1rem; border: 1px solid var(--accent); border-radius: 4px; background: var(--accent); color: var(--on-accent); cursor: pointer; }
    button.plain { background: none; color: var(--accent); }
    button:disabled { opacity: 0.55; cursor: default; }
    :is(button, input, select, .scroll):focus-visible { outline: 2px solid var(--accent); outline-offset: 2px; }
    .figures { display: grid; grid-template-columns: repeat(auto-fit, minmax(24rem, 1fr)); gap: 1rem; margin: 0.75rem 0; }
    figure { margin: 0; padding: 0.5rem; background: var(--panel); border: 1px solid var(--rule); border-radius: 6px; }
    figcaption {
      color: var(--quiet);
      font-size: 0.85rem;
    }
    svg { display: block; width: 100%; height: auto; }
    .scroll { overflow-x: auto; }
    table { border-collapse: collapse; width: 100%; font-variant-numeric: tabular-nums; }
    th, td { padding: 0.3rem 0.6rem; text-align: right; border-bottom: 1px solid var(--rule); font-weight: 400; white-space: nowrap; }
    thead th { color: var(--quiet); }
    th:first-child { text-align: left; }
    .fault { color: var(--warn); border-left: 3px solid var(--warn); padding-left: 0.75rem; overflow-wrap: anywhere; }
    .empty { max-width: 34rem; color: var(--quiet); padding-top: 1rem; }
    .notes { color: var(--quiet); padding-left: 1.1rem; }
    footer { border-top: 1px solid var(--rule); padding: 0.75rem 0 1.5rem; font-size: 0.9rem; }
  `;
}
