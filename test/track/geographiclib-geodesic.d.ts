declare module 'geographiclib-geodesic' {
  interface Result {
    readonly s12?: number;
    readonly lat2?: number;
    readonly lon2?: number;
    readonly azi1?: number;
    readonly azi2?: number;
  }
  interface Line {
    readonly s13: number;
    Position(distance: number): Result;
  }
  interface Solver {
    Direct(lat1: number, lon1: number, azimuth: number, distance: number): Result;
    Inverse(lat1: number, lon1: number, lat2: number, lon2: number): Result;
    InverseLine(lat1: number, lon1: number, lat2: number, lon2: number): Line;
  }
  const geodesic: { readonly Geodesic: { readonly WGS84: Solver } };
  export default geodesic;
}
