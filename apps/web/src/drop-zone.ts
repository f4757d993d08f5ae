/** A place to drop files on, with a button that does the same. Emits `rt-files` with the files. */
import { css, html, LitElement, type TemplateResult } from 'lit';
import { customElement, property, state } from 'lit/decorators.js';

@customElement('rt-drop-zone')
export class DropZone extends LitElement {
  /** What the place is for, and which files it takes. */
  @property() name = '';
  @property() hint = '';
  @state() private over = false;

  protected override render(): TemplateResult {
    return html`
      <div
        class=${this.over ? 'drop over' : 'drop'}
        @dragover=${(event: DragEvent) => {
          event.preventDefault();
          this.over = true;
        }}
        @dragleave=${() => {
          this.over = false;
        }}
        @drop=${(event: DragEvent) => {
          event.preventDefault();
          this.over = false;
          this.tell(event.dataTransfer?.files);
        }}
      >
        <strong>${this.name}</strong>
        <span>${this.hint}</span>
        <label>
          Or choose files
          <input
            type="file"
            multiple
            @change=${(event: Event) => {
              const input = event.target as HTMLInputElement;
              this.tell(input.files);
              input.value = '';
            }}
          />
        </label>
        <slot></slot>
      </div>
    `;
  }

  private tell(files: FileList | null | undefined): void {
    if (files?.length) this.dispatchEvent(new CustomEvent('rt-files', { detail: [...files] }));
  }

  static override styles = css`
    .drop { display: flex; flex-direction: column; gap: 0.5rem; padding: 0.8rem 1rem; border: 1.5px dashed var(--rule); border-radius: 6px; background: var(--panel); }
    .drop.over { border-color: var(--accent); }
    span { color: var(--quiet); }
    label { color: var(--quiet); }
    input { display: block; width: 100%; margin-top: 0.25rem; font: inherit; color: var(--ink); }
    input:focus-visible { outline: 2px solid var(--accent); outline-offset: 2px; }
  `;
}
