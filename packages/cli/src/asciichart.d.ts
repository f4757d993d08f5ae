declare module 'asciichart' {
  export function plot(
    series: readonly number[],
    options?: { readonly height?: number; readonly format?: (value: number) => string },
  ): string;
  const asciichart: { readonly plot: typeof plot };
  export default asciichart;
}
