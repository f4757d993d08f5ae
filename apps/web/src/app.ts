/** The page: candidates, evidence and a few choices on the left; prediction or finding beside them. */
import type { Judgement, Prediction } from '@ringtrue/core';
import { css, html, LitElement, nothing, type TemplateResult } from 'lit';
import { customElement, state } from 'lit/decorators.js';
import tideglass from '../../../demo-structures/tideglass.cif?raw';
import { Computing } from './computing.js';
import './drop-zone.js';
import { FINDING_MARKS } from './finding-marks.js';
import './prediction-view.js';
import type { TextFile } from './worker.js';

/** Larger files are refused before they are read, bytes. */
const LARGEST_FILE = 100e6;

/** "3,12" as a range; nothing for an empty text. @throws {Error} what is wanted */
function rangeOf(what: string, text: string): readonly [number, number] | undefined {
  if (text === '') return undefined;
  const [from, to, ...more] = text.split(/[,;\s]+/).map(Number);
  if (!(from! < to!) || more.length > 0) throw new Error(`the ${what} wants two rising numbers like 3,12; got "${text}"`);
  return [from!, to!];
}

@customElement('rt-app')
export class App extends LitElement {
  @state() private candidates: readonly TextFile[] = [];
  /** Name of the candidate that is shown and predicted. */
  @state() private shown = '';
  @state() private scans: readonly TextFile[] = [];
  @state() private judgement: Judgement | undefined;
  @state() private rivals = false;
  @state() private kRange = '';
  @state() private rRange = '';
  @state() private absorber = '';
  @state() private edge: 'K' | 'L3' | 'L2' | 'L1' = 'K';
  @state() private thermal: 'suited' | 'debye' | 'springs' = 'suited';
  @state() private temperature = 300;
  @state() private debyeTemperature: number | undefined;
  @state() private radius = 5;
  @state() private running = false;
  @state() private fault: string | undefined;
  @state() private prediction: Prediction | undefined;
  private readonly computing = new Computing();

  protected override render(): TemplateResult {
    return html`
      <header>
        <h1>Ringtrue</h1>
        <p>Does a structure ring true with its EXAFS? Predicted, not fitted. Nothing leaves this machine.</p>
      </header>
      <main>
        <section class="inputs" aria-label="Candidate and conditions">
          ${this.renderCandidates()} ${this.renderEvidence()} ${this.renderChoices()}
        </section>
        <section class="result" aria-label="Prediction" aria-live="polite">
          ${this.fault ? html`<p class="fault" role="alert">${this.fault}</p>` : nothing}
          ${
            this.judgement
              ? html`<rt-finding-view .judgement=${this.judgement} shown=${this.shown}></rt-finding-view>`
              : this.prediction
                ? html`<rt-prediction-view .prediction=${this.prediction}></rt-prediction-view>`
                : this.renderEmpty()
          }
        </section>
      </main>
      <footer>
        Agreement shows consistency; it is no proof of a structure. Work at X-ray sources follows the facility's own
        radiation-safety rules.
      </footer>
    `;
  }

  private get candidate(): TextFile | undefined {
    return this.candidates.find(({ file }) => file === this.shown);
  }

  private renderCandidates(): TemplateResult {
    return html`
      <rt-drop-zone name="Drop structures here" hint="XYZ, PDB, mmCIF or CIF" @rt-files=${(event: CustomEvent<File[]>) => void this.take(event.detail)}>
        <button type="button" class="plain" @click=${this.showExample}>Show the invented example</button>
        <button type="button" class="plain" @click=${this.judgeExample}>Judge the invented oxidase</button>
      </rt-drop-zone>
      ${
        this.candidates.length > 0
          ? html`<ul class="cards" aria-label="Candidates">
              ${this.candidates.map(({ file }) => {
                const finding = this.judgement?.candidates.find((judged) => judged.file === file)?.finding;
                return html`<li>
                  <button type="button" class="card" aria-pressed=${file === this.shown ? 'true' : 'false'} @click=${() => this.show(file)}>
                    <strong>${file}</strong>
                    ${finding ? html`<span>${FINDING_MARKS[finding][0]} ${FINDING_MARKS[finding][1]}</span>` : nothing}
                  </button>
                  <button type="button" class="plain remove" aria-label=${`Remove ${file}`} @click=${() => this.takeAway(file)}>✕</button>
                </li>`;
              })}
            </ul>`
          : nothing
      }
    `;
  }

  private renderEvidence(): TemplateResult {
    return html`
      <rt-drop-zone name="Drop measured scans here" hint="Raw absorption or χ(k): repeats of one spectrum" @rt-files=${(event: CustomEvent<File[]>) => void this.takeScans(event.detail)}>
      </rt-drop-zone>
      ${
        this.scans.length > 0
          ? html`<ul class="cards" aria-label="Evidence">
              ${this.scans.map(
                ({ file }) => html`<li>
                  <span class="card">${file}</span>
                  <button type="button" class="plain remove" aria-label=${`Remove ${file}`} @click=${() => {
                    this.scans = this.scans.filter((scan) => scan.file !== file);
                    this.judgement = undefined;
                  }}>✕</button>
                </li>`,
              )}
            </ul>`
          : nothing
      }
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
            ${(['suited', 'debye', 'springs'] as const).map((model) => html`<option value=${model} ?selected=${model === this.thermal}>${{ suited: 'as suits', debye: 'Debye', springs: 'springs' }[model]}</option>`)}
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
        ${this.renderRange('Window in k', 'Å⁻¹', this.kRange, 'as far as it tells', (value) => {
          this.kRange = value;
        })}
        ${this.renderRange('Window in R', 'Å', this.rRange, '1,4', (value) => {
          this.rRange = value;
        })}
        <label class="check">
          <span>Judge rivals too</span>
          <input
            type="checkbox"
            .checked=${this.rivals}
            @change=${(event: Event) => {
              this.rivals = (event.target as HTMLInputElement).checked;
            }}
          />
        </label>
        ${
          this.running
            ? html`<button type="button" @click=${this.cancel}>Cancel</button>`
            : html`<button type="submit" ?disabled=${!this.candidate}>Predict</button>
                <button type="button" ?disabled=${this.candidates.length === 0 || this.scans.length === 0} @click=${() => void this.judge()}>Judge</button>`
        }
      </form>
    `;
  }

  private renderRange(label: string, unit: string, value: string, placeholder: string, set: (value: string) => void): TemplateResult {
    return html`<label>
      <span>${label}</span>
      <input
        type="text"
        inputmode="decimal"
        placeholder=${placeholder}
        .value=${value}
        @change=${(event: Event) => set((event.target as HTMLInputElement).value.trim())}
      />
      <span class="unit">${unit}</span>
    </label>`;
  }

  private renderEmpty(): TemplateResult {
    return html`<p class="empty">
      ${
        this.running
          ? 'Computing atoms, potentials and phase shifts …'
          : 'Drop structures and measured scans on the left, name the absorbing element, and press Judge: the finding appears here. Predict needs a structure alone. The invented oxidase needs one press.'
      }
    </p>`;
  }

  private async take(files: readonly File[]): Promise<void> {
    const taken = await this.textsOf(files);
    if (taken.length === 0) return;
    const names = new Set(taken.map(({ file }) => file));
    this.candidates = [...this.candidates.filter(({ file }) => !names.has(file)), ...taken];
    this.shown = taken.at(-1)!.file;
  }

  private async takeScans(files: readonly File[]): Promise<void> {
    const taken = await this.textsOf(files);
    const names = new Set(taken.map(({ file }) => file));
    this.scans = [...this.scans.filter(({ file }) => !names.has(file)), ...taken];
  }

  /** Files as text; what is too large is told and left out. What stood here no longer belongs to what is chosen. */
  private async textsOf(files: readonly File[]): Promise<TextFile[]> {
    this.cancel();
    this.prediction = undefined;
    this.judgement = undefined;
    this.fault = undefined;
    const texts: TextFile[] = [];
    for (const file of files) {
      if (file.size > LARGEST_FILE)
        this.fault = `${file.name}: ${Math.round(file.size / 1e6)} MB is more than the ${LARGEST_FILE / 1e6} MB that are read here; cut out the part around the absorber.`;
      else texts.push({ file: file.name, text: await file.text() });
    }
    return texts;
  }

  private show(file: string): void {
    if (this.shown !== file) this.prediction = undefined;
    this.shown = file;
  }

  private takeAway(file: string): void {
    this.candidates = this.candidates.filter((candidate) => candidate.file !== file);
    this.judgement = undefined;
    this.prediction = undefined;
    if (this.shown === file) this.shown = this.candidates.at(-1)?.file ?? '';
  }

  private readonly showExample = (): void => {
    this.candidates = [{ file: 'tideglass.cif', text: tideglass }];
    this.shown = 'tideglass.cif';
    this.scans = [];
    this.absorber = 'Mn';
    this.edge = 'K';
    this.temperature = 15;
    this.debyeTemperature = 500;
    void this.run();
  };

  private readonly judgeExample = async (): Promise<void> => {
    const { EXAMPLE } = await import('./oxidase-example.js');
    this.candidates = EXAMPLE.candidates;
    this.scans = EXAMPLE.scans;
    this.shown = EXAMPLE.candidates[0].file;
    this.absorber = 'Mn';
    this.edge = 'K';
    this.temperature = 15;
    this.debyeTemperature = undefined;
    await this.judge();
  };

  private async judge(): Promise<void> {
    this.running = true;
    this.fault = undefined;
    this.judgement = undefined;
    this.prediction = undefined;
    try {
      const { absorber, edge, temperature, radius, thermal, debyeTemperature, rivals } = this;
      const [kRange, rRange] = [rangeOf('window in k', this.kRange), rangeOf('window in R', this.rRange)];
      // what draws the finding comes with it: a first look at the page does not pay for it
      const [outcome] = await Promise.all([
        this.computing.judge(
          this.candidates,
          this.scans,
          { absorber, edge, temperature, ...(kRange ? { kRange } : {}), ...(rRange ? { rRange } : {}) },
          { radius, rivals, ...(thermal === 'suited' ? {} : { thermal }), ...(debyeTemperature === undefined ? {} : { debyeTemperature }) },
        ),
        import('./finding-view.js'),
      ]);
      if (!outcome) return;
      this.running = false;
      if ('fault' in outcome) this.fault = outcome.fault;
      else this.judgement = outcome.judgement;
    } catch (error) {
      this.running = false;
      this.fault = error instanceof Error ? error.message : String(error);
    }
  }

  private readonly cancel = (): void => {
    this.computing.cancel();
    this.running = false;
  };

  private async run(): Promise<void> {
    if (!this.candidate) return;
    this.running = true;
    this.fault = undefined;
    this.prediction = undefined;
    this.judgement = undefined;
    const { absorber, edge, thermal, temperature, debyeTemperature, radius } = this;
    const { file, text } = this.candidate;
    const conditions = {
      absorber,
      edge,
      thermal: thermal === 'suited' ? ('debye' as const) : thermal,
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
    header p, .quiet, footer, .unit { color: var(--quiet); }
    main { display: grid; grid-template-columns: 19rem minmax(0, 1fr); gap: 1.5rem; padding: 1.25rem 0; }
    @media (max-width: 900px) { main { grid-template-columns: 1fr; } }
    .cards { list-style: none; margin: 0.5rem 0; padding: 0; display: grid; gap: 0.35rem; }
    .cards li { display: grid; grid-template-columns: 1fr auto; gap: 0.35rem; }
    .card { display: flex; flex-direction: column; text-align: left; font-weight: 400; color: var(--ink); background: var(--panel); border: 1px solid var(--rule); border-radius: 4px; padding: 0.4rem 0.6rem; overflow-wrap: anywhere; min-width: 0; }
    .card[aria-pressed='true'] { border-color: var(--accent); box-shadow: inset 3px 0 0 var(--accent); }
    button.remove { padding: 0.2rem 0.5rem; border-color: var(--rule); color: var(--quiet); }
    rt-drop-zone { display: block; margin-bottom: 0.75rem; }
    form label.check { grid-template-columns: 1fr auto; }
    form { display: grid; gap: 0.6rem; margin-top: 1rem; }
    form label { display: grid; grid-template-columns: 1fr 5.5rem 3.6rem; align-items: center; gap: 0.5rem; }
    input, select { font: inherit; color: inherit; background: var(--panel); border: 1px solid var(--rule); border-radius: 4px; padding: 0.3rem 0.45rem; min-width: 0; }
    button { font: inherit; font-weight: 600; padding: 0.5rem 1rem; border: 1px solid var(--accent); border-radius: 4px; background: var(--accent); color: var(--on-accent); cursor: pointer; }
    button.plain { background: none; color: var(--accent); }
    button:disabled { opacity: 0.55; cursor: default; }
    :is(button, input, select, .scroll):focus-visible { outline: 2px solid var(--accent); outline-offset: 2px; }
    .fault { color: var(--warn); border-left: 3px solid var(--warn); padding-left: 0.75rem; overflow-wrap: anywhere; }
    .empty { max-width: 34rem; color: var(--quiet); padding-top: 1rem; }
    footer { border-top: 1px solid var(--rule); padding: 0.75rem 0 1.5rem; font-size: 0.9rem; }
  `;
}
