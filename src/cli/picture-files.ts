import type { ChartFile } from '../report/chart-file.ts';
import type { PngRenderer } from './png-renderer.ts';
import type { ResultFile } from './result-folder.ts';

/** Charts below `charts/`, each as SVG and, with a renderer, as PNG beside it. */
export function pictureFiles(charts: readonly ChartFile[], draw: PngRenderer | null): readonly ResultFile[] {
  return charts.flatMap(({ name, svg }): ResultFile[] => {
    const picture = { name: `charts/${name}`, text: svg };
    if (draw === null) return [picture];
    return [picture, { name: picture.name.replace(/svg$/, 'png'), bytes: draw(svg) }];
  });
}
