import { writeFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { compose } from '#shared/composer/compose';
import { writeCsv } from '#shared/composer/write-csv';
import { writeVcd } from '#shared/composer/write-vcd';
import type { Sample } from './scripts';
import { SAMPLES } from './scripts';

const FOLDER = fileURLToPath(new URL('.', import.meta.url));

function write(sample: Sample): void {
  const composed = compose(sample.script);
  const { layout } = sample;
  const pieces = layout.format === 'vcd' ? writeVcd(composed, layout) : writeCsv(composed, layout);
  writeFileSync(FOLDER + sample.file, [...pieces].join(''));
  const script = JSON.stringify({ ...sample.script, layout }, null, 2);
  writeFileSync(`${FOLDER}${sample.file.replace(/\.\w+$/, '')}.script.json`, `${script}\n`);
}

for (const sample of SAMPLES) write(sample);

const rows = SAMPLES.map((sample) => `| [${sample.file}](${sample.file}) | ${sample.holds} |`);
writeFileSync(
  `${FOLDER}README.md`,
  [
    '# Samples',
    '',
    'Small captures made by the composer from the scripts beside them (`npm run samples` makes them anew; they always come out the same). They show the product, they prove nothing: for that see `spec/captures`.',
    '',
    '| file | what is in it |',
    '| --- | --- |',
    ...rows,
    '',
  ].join('\n'),
);
