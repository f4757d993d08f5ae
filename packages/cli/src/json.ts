/** One JSON document; typed arrays become plain ones. */
export const toJson = (value: unknown): string =>
  JSON.stringify(value, (_, part: unknown) => (ArrayBuffer.isView(part) ? Array.from(part as Float64Array) : part));
