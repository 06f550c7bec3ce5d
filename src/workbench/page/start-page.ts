import { bytesOf, type CarriedCase, type Start } from '../../run/carried-case.ts';
import { Bench } from './bench.ts';
import { part } from './element.ts';
import { type Study, studyFile } from './study.ts';

const json = <T>(id: string): T => JSON.parse(part(id, HTMLScriptElement).textContent ?? 'null') as T;
const studyOf = ({ file, files }: CarriedCase): Study => ({
  file,
  files: files.map((one) => studyFile(one.name, bytesOf(one))),
});

/** @param code of this page's script, for its threads */
export function startPage(code: string): void {
  const bench = new Bench(code);
  const demos = json<readonly CarriedCase[]>('demo-studies');
  const start = json<Start>('start');

  const beginDemo = (index: number): void => {
    const demo = demos[index];
    if (demo !== undefined) bench.begin(studyOf(demo));
  };
  for (const button of document.querySelectorAll<HTMLElement>('[data-demo]'))
    button.addEventListener('click', () => {
      beginDemo(Number(button.dataset.demo));
      part('values', HTMLElement).focus({ preventScroll: true });
    });

  async function bring(files: Iterable<File>): Promise<void> {
    const brought = await Promise.all(
      [...files].map(async (file) => ({ name: file.name, bytes: new Uint8Array(await file.arrayBuffer()) })),
    );
    if (brought.length > 0) bench.bring(brought);
  }

  const open = part('open', HTMLInputElement);
  open.addEventListener('change', async () => {
    await bring(open.files ?? []);
    open.value = '';
  });
  document.addEventListener('dragover', (event) => {
    if (!event.dataTransfer?.types.includes('Files')) return;
    event.preventDefault();
    document.body.classList.add('dropping');
  });
  document.addEventListener('dragleave', ({ relatedTarget }) => {
    if (relatedTarget === null) document.body.classList.remove('dropping');
  });
  document.addEventListener('drop', async (event) => {
    event.preventDefault();
    document.body.classList.remove('dropping');
    await bring(event.dataTransfer?.files ?? []);
  });

  if (start !== null && 'study' in start) bench.begin(studyOf(start.study));
  else if (start !== null) beginDemo(start.demo);
}
