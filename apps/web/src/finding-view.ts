/** A finding and what stands behind it: the sentence, the numbers, the figures, the rivals, the caution. Draws; computes nothing. */
import type { CandidateJudgement, Judgement } from '@ringtrue/core';
import { comparisonInK, comparisonInR, disorderChart, overlengthChart, rankingChart, strainChart } from '@ringtrue/figures';
import { css, html, LitElement, nothing, type TemplateResult } from 'lit';
import { customElement, property } from 'lit/decorators.js';
import { unsafeSVG } from 'lit/directives/unsafe-svg.js';
import { FINDING_MARKS } from './finding-marks.js';

@customElement('rt-finding-view')
export class FindingView extends LitElement {
  @property({ attribute: false }) judgement?: Judgement;
  /** Name of the candidate shown. */
  @property() shown = '';

  protected override render(): TemplateResult | typeof nothing {
    const candidate = this.judgement?.candidates.find(({ file }) => file === this.shown);
    if (!this.judgement || !candidate) return nothing;
    const [mark, words] = FINDING_MARKS[candidate.finding];
    return html`
      <h2><span aria-hidden="true">${mark}</span> ${candidate.file}: ${words}</h2>
      <p class="sentence">${candidate.sentence}</p>
      <p>${candidate.overlength.sentence}</p>
      ${this.figures(candidate)} ${this.numbers(candidate)} ${valence(candidate)} ${rivals(candidate)}
      ${list('What would change this finding', candidate.wouldChange)} ${list('What these data could never tell', candidate.cannotTell)}
      ${list('What was assumed', candidate.assumptions)}
      ${list(
        'To be known',
        [...this.judgement.warnings, ...candidate.warnings].map(({ message }) => message),
      )}
      <p class="caution">${candidate.caution}</p>
    `;
  }

  private figures(candidate: CandidateJudgement): TemplateResult {
    const { evidence, candidates } = this.judgement!;
    return html`<div class="figures">
      ${candidate.comparisons.map(
        (comparison, s) => html`
          <figure>${unsafeSVG(comparisonInK(comparison, evidence[s]!))}</figure>
          <figure>${unsafeSVG(comparisonInR(comparison, evidence[s]!))}</figure>
        `,
      )}
      <figure>${unsafeSVG(strainChart(candidate))}</figure>
      <figure>${unsafeSVG(overlengthChart(candidate.file, candidate.overlength))}</figure>
      <figure>${unsafeSVG(disorderChart(candidate.file, candidate.disorder))}</figure>
      ${candidates.length > 1 ? html`<figure>${unsafeSVG(rankingChart(this.judgement!))}</figure>` : nothing}
    </div>`;
  }

  private numbers(candidate: CandidateJudgement): TemplateResult {
    const { x, independentPoints, p, pDistances, rFactor, power, posterior } = candidate;
    const rows: [string, string][] = [
      ['X (misfit and strain)', x.toFixed(1)],
      ['independent points', independentPoints.toFixed(1)],
      ['p', p < 0.001 ? 'below 0.001' : p.toFixed(3)],
      ['p of the distances', pDistances < 0.001 ? 'below 0.001' : pDistances.toFixed(3)],
      ['R-factor', rFactor.toFixed(4)],
      ['power against a first shell off by 0.1 Å', `${(100 * power).toFixed(0)} %`],
      ['posterior', `${posterior.method}: ${posterior.reason}`],
    ];
    return html`<table>
      <caption>The numbers behind it</caption>
      <tbody>${rows.map(([name, value]) => html`<tr><th scope="row">${name}</th><td>${value}</td></tr>`)}</tbody>
    </table>`;
  }

  static override styles = css`
    :host { display: block; }
    h2 { font-size: 1.15rem; margin: 0 0 0.4rem; overflow-wrap: anywhere; }
    h3 { font-size: 1rem; margin: 1rem 0 0.2rem; }
    p { margin: 0.3rem 0; max-width: 60rem; }
    .sentence { font-weight: 600; }
    .caution { border-left: 3px solid var(--accent); padding-left: 0.75rem; color: var(--quiet); }
    .figures { display: grid; grid-template-columns: repeat(auto-fit, minmax(min(24rem, 100%), 1fr)); gap: 1rem; margin: 0.75rem 0; }
    figure { margin: 0; padding: 0.5rem; background: var(--panel); border: 1px solid var(--rule); border-radius: 6px; }
    svg { display: block; width: 100%; height: auto; }
    table { border-collapse: collapse; font-variant-numeric: tabular-nums; margin-top: 0.75rem; }
    caption { text-align: left; font-weight: 600; padding-bottom: 0.2rem; }
    th, td { padding: 0.25rem 0.9rem 0.25rem 0; text-align: left; border-bottom: 1px solid var(--rule); font-weight: 400; }
    ul { margin: 0.2rem 0; padding-left: 1.1rem; color: var(--quiet); max-width: 60rem; }
    .scroll { overflow-x: auto; }
  `;
}

function list(title: string, items: readonly string[]): TemplateResult | typeof nothing {
  if (items.length === 0) return nothing;
  return html`<h3>${title}</h3><ul>${[...new Set(items)].map((item) => html`<li>${item}</li>`)}</ul>`;
}

function valence({ valence: sites }: CandidateJudgement): TemplateResult | typeof nothing {
  if (sites.length === 0) return nothing;
  return html`<table>
    <caption>Bond-valence sums: as given, and with the distances the data want</caption>
    <thead><tr><th scope="col">site</th><th scope="col">supposed</th><th scope="col">as given</th><th scope="col">rescaled</th></tr></thead>
    <tbody>${sites.flatMap(({ site, asGiven, rescaled }) =>
      asGiven.map(
        ({ oxidationState, sum, sd }, i) =>
          html`<tr><th scope="row">${site}</th><td>${oxidationState}+</td><td>${sum.toFixed(2)} ± ${sd.toFixed(2)}</td><td>${rescaled[i]!.sum.toFixed(2)}</td></tr>`,
      ),
    )}</tbody>
  </table>`;
}

function rivals({ rivals: all, notExcluded }: CandidateJudgement): TemplateResult | typeof nothing {
  if (all.length === 0) return nothing;
  return html`<h3>Rivals: ${notExcluded.length} of ${all.length} are not excluded</h3>
    <div class="scroll" tabindex="0" role="region" aria-label="Rivals">
      <table>
        <thead><tr><th scope="col">rival</th><th scope="col">X</th><th scope="col">p</th><th scope="col">ln Z against the candidate</th><th scope="col">excluded</th></tr></thead>
        <tbody>${all.map(
          ({ label, x, p, logEvidence, excluded }) =>
            html`<tr><th scope="row">${label}</th><td>${x.toFixed(1)}</td><td>${p.toPrecision(2)}</td><td>${logEvidence.toFixed(1)}</td><td>${excluded ? 'yes' : 'no'}</td></tr>`,
        )}</tbody>
      </table>
    </div>`;
}
