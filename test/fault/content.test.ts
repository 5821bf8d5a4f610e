import { describe, expect, it } from 'vitest';
import { escapeForTerminal } from '../../src/commands/terminalText.js';
import { eventLine } from '../../src/commands/watchPrinter.js';
import { decodeJcamp } from '../../src/decode/decodeJcamp.js';
import { readRunFacts } from '../../src/record/runFacts.js';
import { renderReport } from '../../src/report/renderReport.js';
import { renderSeriesCsv } from '../../src/series/renderSeriesCsv.js';
import { jcamp, ledgerOf, makeWorld, minutesLater, nightFiles, out, pass, startMs, type World } from './world.js';

const old = startMs - 1e6;
const run = `${out}/BX-0417`;

interface Point {
  file: string;
  status: string;
  acquired: string;
  flags: { code: string; message: string }[];
}
const pointsOf = (world: World) =>
  (JSON.parse(world.disk.files().get(`${run}/series.json`)!.toString('utf8')) as { points: Point[] }).points;

async function night(files: Record<string, string>) {
  const world = makeWorld(files);
  expect((await pass(world)).ok).toBe(true);
  return world;
}

/** A whole, small spectrum in AFFN, with places to spoil. */
function spectrum(more: { head?: string; table?: string; points?: string; first?: string; last?: string } = {}): Uint8Array {
  const { head = '', table = '0 1 2 3 4\n4 5 4 3 2\n', points = '8', first = '0', last = '7' } = more;
  return Buffer.from(
    `##TITLE=x\n##JCAMP-DX=5.01\n##DATA TYPE=NMR SPECTRUM\n##ORIGIN=\n##OWNER=\n##.OBSERVE FREQUENCY=400\n##.OBSERVE NUCLEUS=^1H\n${head}##XUNITS=HZ\n##YUNITS=ARBITRARY UNITS\n##XFACTOR=1\n##YFACTOR=1\n##FIRSTX=${first}\n##LASTX=${last}\n##NPOINTS=${points}\n##FIRSTY=1\n##XYDATA=(X++(Y..Y))\n${table}##END=\n`,
  );
}

function codeOf(bytes: Uint8Array): string {
  const decoded = decodeJcamp(bytes, 'x.jdx', {});
  if (!decoded.ok) return decoded.problem.code;
  const [block] = decoded.value;
  return block === undefined ? 'nothing' : block.ok ? 'read' : block.problem.code;
}

describe('series that are not as planned', () => {
  it('F37: the same data under another header is flagged on both points, and neither is dropped', async () => {
    const world = await night(nightFiles(4));
    world.disk.write(
      '/share/BX-0417/tp-009.jdx',
      nightFiles(4)['BX-0417/tp-002.jdx']!.replace('TITLE=', 'TITLE=again ').replace(minutesLater(20), minutesLater(21)),
      old,
    );
    await pass(world);
    const twins = pointsOf(world).filter(({ flags }) => flags.some(({ code }) => code === 'same-data'));
    expect(twins.map(({ file, status }) => `${file} ${status}`)).toEqual(['tp-002.jdx flagged', 'tp-009.jdx flagged']);
    expect(pointsOf(world)).toHaveLength(5);
  });

  it('F45: a missing point shows as a gap', async () => {
    const files = nightFiles(8);
    delete files['BX-0417/tp-004.jdx'];
    const world = await night(files);
    const facts = await readRunFacts(run, world.disk.port);
    if (!facts.ok) throw new Error(facts.problem.message);
    expect(facts.value.exceptions).toMatchObject([
      { kind: 'gap', file: 'tp-005.jdx', message: expect.stringContaining('20 min') },
    ]);
    expect(world.disk.files().get(`${run}/series.json`)?.toString()).toContain('tp-005.jdx');
  });

  it('F46: equal times are ordered by name and flagged; a missing time is taken from the file system and says so', async () => {
    const same = minutesLater(10);
    const world = makeWorld({ 'BX-0417/b.jdx': jcamp('b', same, '##DATA=b\n'), 'BX-0417/a.jdx': jcamp('a', same) });
    world.disk.write('/share/BX-0417/c.jdx', jcamp('c').replace(/##LONGDATE=.*\n/, ''), old);
    await pass(world);
    const codes = Object.fromEntries(pointsOf(world).map(({ file, flags }) => [file, flags.map(({ code }) => code)]));
    expect(codes['a.jdx']).toContain('time-shared');
    expect(codes['b.jdx']).toContain('time-shared');
    expect(codes['c.jdx']).toContain('time-from-file-system');
    expect(pointsOf(world).find(({ file }) => file === 'c.jdx')?.acquired).toBe(
      new Date(old).toISOString().replace('.000Z', 'Z'),
    );
    const order = pointsOf(world).map(({ file }) => file);
    expect(order.indexOf('a.jdx')).toBeLessThan(order.indexOf('b.jdx'));
  });
});

describe('hostile contents', () => {
  it('the small spectrum is read when nothing is wrong with it', () => {
    expect(codeOf(spectrum())).toBe('read');
  });

  it('F49: a repeat count of a thousand million is refused before anything is allocated', () => {
    const before = process.memoryUsage().arrayBuffers;
    const began = performance.now();
    expect(codeOf(spectrum({ table: '0A1s99999999\n' }))).toBe('jcamp-repeat-limit');
    expect(codeOf(spectrum({ table: '0A1s99999999\n', points: '1e9', last: '1e9' }))).not.toBe('read');
    expect(performance.now() - began).toBeLessThan(1000);
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(50e6);
  });

  const lies: Record<string, Uint8Array> = {
    'too few points': spectrum({ points: '9', last: '8' }),
    'an axis without extent': spectrum({ first: '5', last: '5' }),
    'not a number': spectrum({ first: 'NaN' }),
    'a number too large': spectrum({ table: '0 1e400 2 3 4\n4 5 4 3 2\n' }),
    'a missing line': spectrum({ table: '0 1 2 3 4\n' }),
  };
  for (const [what, bytes] of Object.entries(lies)) {
    it(`F51: ${what} is an exact refusal`, () => {
      expect(codeOf(bytes)).toMatch(/^jcamp-/);
    });
  }

  it('F51: mixed line ends and a byte-order mark are tolerated', () => {
    const text = Buffer.from(spectrum()).toString();
    let index = 0;
    expect(codeOf(Buffer.from(text.replaceAll('\n', () => ['\n', '\r\n', '\r'][index++ % 3]!)))).toBe('read');
    expect(codeOf(Buffer.from(`\ufeff${text}`))).toBe('read');
  });

  it('F52: a hundred thousand labels and a line of many megabytes end in linear time', () => {
    const labels = spectrum({ head: Array.from({ length: 100_000 }, (_, index) => `##$X${index}=${index}\n`).join('') });
    const line = spectrum({ head: `##ORIGIN=${'a '.repeat(5_000_000)}\n` });
    const nested = Buffer.from('##TITLE=x\n##DATA TYPE=LINK\n##BLOCKS=1\n'.repeat(2000));
    for (const bytes of [labels, line, nested]) {
      // Time of the processor, not of the clock: other tests run beside this one.
      const before = process.cpuUsage();
      codeOf(bytes);
      const { user, system } = process.cpuUsage(before);
      expect((user + system) / 1e6).toBeLessThan(2 * Math.max(1, bytes.length / 1e6));
    }
  });

  it('F53: another technique, two dimensions and structures are unsupported, and the message says what was found', () => {
    for (const type of ['INFRARED SPECTRUM', 'MASS SPECTRUM', 'nD NMR SPECTRUM']) {
      const decoded = decodeJcamp(Buffer.from(Buffer.from(spectrum()).toString().replace('NMR SPECTRUM', type)), 'x.jdx', {});
      const problem = decoded.ok ? (decoded.value[0]?.ok === false ? decoded.value[0].problem : undefined) : decoded.problem;
      expect(problem).toMatchObject({ code: 'jcamp-unsupported', message: expect.stringContaining(type) });
    }
  });

  it('F58: labels like __proto__ and constructor are plain data', () => {
    expect(codeOf(spectrum({ head: '##__proto__=polluted\n##constructor=x\n##$__proto__=x\n##hasOwnProperty=x\n' }))).toBe(
      'read',
    );
    expect(({} as Record<string, unknown>).polluted).toBeUndefined();
    expect(Object.prototype).not.toHaveProperty('polluted');
  });

  it('F54: no cell of the table can start a formula, and numbers stay numbers', async () => {
    const names = ['=HYPERLINK("x").jdx', '+1.jdx', '-1.5.jdx', '@SUM.jdx', '\tx.jdx', 'a,b"c.jdx'];
    const world = makeWorld();
    for (const [index, name] of names.entries())
      world.disk.write(`/share/BX-0417/${name}`, jcamp(name, minutesLater(10 * index)), old);
    await pass(world);
    const csv = world.disk.files().get(`${run}/series.csv`)!.toString('utf8');
    const cells = csv
      .split('\r\n')
      .slice(1, -1)
      .map((line) => line.slice(0, line.startsWith('"') ? line.indexOf('",') + 1 : line.indexOf(',')));
    for (const cell of cells) expect(cell.replace(/^"/, '')).not.toMatch(/^[=+\-@\t\r]/);
    expect(csv).toContain('"a,b""c.jdx"');
    const facts = await readRunFacts(run, world.disk.port);
    if (!facts.ok) throw new Error(facts.problem.message);
    const negative = { ...facts.value.series, points: facts.value.series.points.map((point) => ({ ...point, elapsedS: -1.5 })) };
    expect(renderSeriesCsv(negative, facts.value.method)).toContain(',-1.5,');
  });

  const hostile = '</script><script>alert(1)</script><!-- <img src=x onerror=alert(1)> \u2028 $& $1 ]]> " \' `';
  it('F55 F56: a hostile title, name and note are text in HTML and PDF, and draw twice to the same bytes', {
    timeout: 60_000,
  }, async () => {
    const world = makeWorld();
    for (let index = 0; index < 3; index += 1)
      world.disk.write(`/share/BX-0417/${index}<img onerror=x>.jdx`, jcamp(hostile, minutesLater(10 * index)), old);
    world.disk.write(
      '/share/BX-0417/run.yaml',
      `kinetrail: run/1\nbatch: ${JSON.stringify(`${hostile}) \\\\ (`)}\nnotes: ${JSON.stringify('x'.repeat(10_000))}\n`,
      old,
    );
    await pass(world);
    const facts = await readRunFacts(run, world.disk.port);
    if (!facts.ok) throw new Error(facts.problem.message);
    const [first, second] = [await renderReport(facts.value), await renderReport(facts.value)];
    expect(first.html).toBe(second.html);
    expect(Buffer.from(first.pdf).equals(Buffer.from(second.pdf))).toBe(true);
    expect(first.html).not.toMatch(/<script>alert|<img|<!-- |<[^>]*\sonerror=/i);
    expect(first.html).toContain("default-src 'none'");
    const pdf = Buffer.from(first.pdf).toString('latin1');
    expect(pdf).not.toMatch(/\/(JavaScript|JS|Launch|OpenAction|AA)\b/);
    expect(pdf.startsWith('%PDF-')).toBe(true);
  });

  it('F57: escapes and line breaks in names and titles cannot move the cursor or forge a line', () => {
    const line = eventLine({
      kind: 'taken',
      run: 'BX\n0417',
      file: 'a\x1b]52;c;x\x07\nerror: forged.jdx',
      message: '\u202egnp \r x',
    });
    expect(line.split('\n')).toHaveLength(1);
    expect(line).toContain('\\x1b]52');
    expect(line).not.toMatch(/[\x00-\x1f\x7f\u202e]/);
    expect(escapeForTerminal('\x9b31m')).toBe('\\x9b31m');
  });

  it('F41: titles and ids never become names of files', async () => {
    const world = await night({
      'BX-0417/a.jdx': jcamp('../../../etc/x'),
      'BX-0417/b.jdx': jcamp('NUL', minutesLater(1)),
      'BX-0417/c.jdx': jcamp('a/b', minutesLater(2)),
    });
    expect(ledgerOf(world).filter(({ state }) => state === 'measured')).toHaveLength(3);
    const names = [...world.disk.files(out).keys()].map((path) => path.slice(out.length + 1));
    for (const name of names)
      expect(name).toMatch(
        /^(index\.html|BX-0417\/(ledger\.jsonl|series\.(json|csv)|report\.(html|pdf)|(raw|points)\/[0-9a-f]{64}\.(gz|json)))$/,
      );
  });
});
