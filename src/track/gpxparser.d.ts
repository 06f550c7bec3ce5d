// The package's own index.d.ts says 'export default' for a CommonJS 'module.exports', leaves out every
// nullable field, and gives distance.cumul as a number; this is what the code really does, as far as we call it.
declare module 'gpxparser' {
  export interface GpxPoint {
    readonly lat: number;
    readonly lon: number;
    readonly ele: number | null;
  }
  export interface GpxPath {
    readonly name: string | null;
    readonly points: readonly GpxPoint[];
  }
  export default class GpxParser {
    /** What `window.DOMParser` made of the text. */
    xmlSource: unknown;
    tracks: GpxPath[];
    routes: GpxPath[];
    parse(xml: string): void;
    getElementValue(parent: unknown, needle: string): string | null;
    queryDirectSelector(parent: unknown, needle: string): unknown;
    calculDistance(points: GpxPoint[]): { total: number; cumul: number[] };
    calcElevation(points: GpxPoint[]): Record<'max' | 'min' | 'pos' | 'neg' | 'avg', number | null>;
    calculSlope(points: GpxPoint[], cumul: number[]): number[];
  }
}
