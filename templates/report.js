'use strict';
// Comfort only: the page is whole without this script. It loads nothing, stores nothing and sends nothing.
(() => {
  const make = (name, text) => {
    const element = document.createElement(name);
    if (text !== undefined) element.textContent = text;
    return element;
  };

  // Values of the nearest marker.
  const tip = make('div');
  tip.className = 'tip';
  tip.hidden = true;
  document.body.append(tip);
  for (const svg of document.querySelectorAll('.drawing svg')) {
    const marks = [...svg.querySelectorAll('[data-tip]')];
    if (marks.length === 0) continue;
    svg.addEventListener('pointermove', (event) => {
      let best;
      let nearest = 24;
      for (const mark of marks) {
        const box = mark.getBoundingClientRect();
        const distance = Math.hypot(event.clientX - box.x - box.width / 2, event.clientY - box.y - box.height / 2);
        if (distance < nearest) [best, nearest] = [mark, distance];
      }
      tip.hidden = best === undefined;
      if (best === undefined) return;
      tip.textContent = best.dataset.tip;
      tip.style.left = `${Math.min(event.pageX + 12, innerWidth - 220)}px`;
      tip.style.top = `${event.pageY + 14}px`;
    });
    svg.addEventListener('pointerleave', () => {
      tip.hidden = true;
    });
  }

  // Sorting by a column, and per cent or fraction.
  const numberOf = (text) => {
    const elapsed = /^(\u2212?)(?:(\d+) h )?(\d+) min$/.exec(text);
    if (elapsed) return (elapsed[1] ? -1 : 1) * (60 * Number(elapsed[2] ?? 0) + Number(elapsed[3]));
    const value = Number.parseFloat(text.replace('\u2212', '-'));
    return Number.isNaN(value) ? undefined : value;
  };
  for (const table of document.querySelectorAll('#points table')) {
    const [body] = table.tBodies;
    const original = [...body.rows];
    [...table.tHead.rows[0].cells].forEach((cell, column) => {
      const button = make('button', cell.textContent);
      button.type = 'button';
      cell.replaceChildren(button);
      button.addEventListener('click', () => {
        const order = cell.ariaSort === 'ascending' ? 'descending' : 'ascending';
        for (const other of table.tHead.rows[0].cells) other.ariaSort = null;
        cell.ariaSort = order;
        const sign = order === 'ascending' ? 1 : -1;
        const keyed = original.map((row, index) => ({ row, index, text: row.cells[column].textContent }));
        keyed.sort((a, b) => {
          const [x, y] = [numberOf(a.text), numberOf(b.text)];
          if (x !== undefined && y !== undefined) return sign * (x - y) || a.index - b.index;
          if (x !== undefined || y !== undefined) return x === undefined ? 1 : -1;
          return sign * a.text.localeCompare(b.text) || a.index - b.index;
        });
        body.append(...keyed.map(({ row }) => row));
      });
    });
  }

  // Moves the decimal point of a printed number as text, so that nothing is rounded again.
  const shiftPoint = (text, places) => {
    const match = /^(\u2212?)(\d+)(?:\.(\d+))?$/.exec(text);
    if (!match) return text;
    const decimals = (match[3] ?? '').length;
    const digits = `${'0'.repeat(8)}${match[2]}${match[3] ?? ''}${'0'.repeat(Math.max(0, places - decimals))}`;
    const at = digits.length - Math.max(0, decimals - places);
    const rest = digits.slice(at);
    const whole = digits.slice(0, at).replace(/^0+(?=\d)/, '');
    return `${match[1]}${whole}${rest ? `.${rest}` : ''}`;
  };
  const points = document.querySelector('#points table');
  const heads = points ? [...points.tHead.rows[0].cells].map((cell) => cell.textContent) : [];
  const shares = heads.flatMap((head, column) =>
    head === 'conversion' || head.startsWith('x(') || (head === 'u' && heads[column - 1] === 'conversion') ? [column] : [],
  );
  if (shares.length > 0) {
    const row = make('p');
    row.className = 'tools';
    const button = make('button', 'Show conversion and fractions in per cent');
    button.type = 'button';
    button.ariaPressed = 'false';
    row.append(button);
    points.parentElement.before(row);
    const plain = [...points.tBodies[0].rows].map((line) => ({ line, texts: shares.map((k) => line.cells[k].textContent) }));
    const names = shares.map((k) => heads[k]);
    button.addEventListener('click', () => {
      const isPercent = button.ariaPressed !== 'true';
      button.ariaPressed = String(isPercent);
      for (const { line, texts } of plain)
        shares.forEach((k, index) => {
          line.cells[k].textContent = isPercent ? shiftPoint(texts[index], 2) : texts[index];
        });
      shares.forEach((k, index) => {
        points.tHead.rows[0].cells[k].querySelector('button').textContent = isPercent ? `${names[index]} / %` : names[index];
      });
    });
  }

  // One time point with its spectrum and fits.
  const source = document.getElementById('traces');
  const signals = document.getElementById('signals');
  if (!source || !signals) return;
  const { points: traces, note } = JSON.parse(source.textContent);
  const digits = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_';
  const places = Object.fromEntries([...digits].map((digit, index) => [digit, index]));
  const unpack = (text) =>
    Array.from({ length: text.length / 2 }, (_, k) => (64 * places[text[2 * k]] + places[text[2 * k + 1]]) / 4095);
  const viewer = make('div');
  viewer.className = 'viewer';
  viewer.role = 'group';
  viewer.ariaLabel = 'One time point';
  const row = make('div');
  row.className = 'row';
  const labelOf = (text, control) => {
    const label = make('label', `${text} `);
    label.append(control);
    return label;
  };
  const choose = make('select');
  const what = make('select');
  traces.forEach(({ label }, index) => choose.append(new Option(label, String(index))));
  choose.selectedIndex = traces.length - 1;
  const whole = make('button', 'Whole range');
  whole.type = 'button';
  row.append(labelOf('Time point', choose), labelOf('Show', what), whole);
  const words = make('p');
  words.ariaLive = 'polite';
  const help = make('p', `Drag over a part to zoom in. ${note}`);
  help.className = 'note';
  const ns = 'http://www.w3.org/2000/svg';
  const svg = document.createElementNS(ns, 'svg');
  svg.setAttribute('viewBox', '0 0 900 328');
  svg.setAttribute('role', 'img');
  svg.setAttribute('aria-label', 'Spectrum of the chosen time point');
  viewer.append(row, svg, words, help);
  signals.querySelector('h2').after(viewer);
  let range;
  const draw = (name, settings) => {
    const element = document.createElementNS(ns, name);
    for (const [key, value] of Object.entries(settings)) element.setAttribute(key, value);
    svg.append(element);
    return element;
  };
  const fillWhat = () => {
    const before = what.value;
    const point = traces[choose.selectedIndex];
    what.replaceChildren();
    if (point.overview) what.append(new Option('whole spectrum', 'whole'));
    point.strips.forEach(({ signal }, index) => what.append(new Option(signal, String(index))));
    if ([...what.options].some(({ value }) => value === before)) what.value = before;
  };
  const current = () => {
    const point = traces[choose.selectedIndex];
    if (what.value === 'whole' && point.overview) {
      const { firstPpm, lastPpm, low, high } = point.overview;
      return { first: firstPpm, last: lastPpm, curves: [['#333333', unpack(low)], ['#333333', unpack(high)]] };
    }
    const strip = point.strips[Number(what.value)];
    if (!strip) return undefined;
    const data = unpack(strip.data);
    return {
      first: strip.firstPpm,
      last: strip.firstPpm - (data.length - 1) * strip.stepPpm,
      curves: [['#333333', data], ['#D55E00', unpack(strip.fit)]],
      words: point.words.find((sentence) => sentence.startsWith(`${strip.signal}: `)),
    };
  };
  const place = (ppm) => 20 + (860 * (range[0] - ppm)) / (range[0] - range[1]);
  const render = () => {
    svg.replaceChildren();
    const shown = current();
    words.textContent = shown?.words ?? '';
    if (!shown) return;
    range ??= [shown.first, shown.last];
    const stepPpm = (shown.first - shown.last) / (shown.curves[0][1].length - 1);
    const seen = (values) => values.map((value, k) => [shown.first - k * stepPpm, value]).filter(([ppm]) => ppm <= range[0] && ppm >= range[1]);
    const curves = shown.curves.map(([color, values]) => [color, seen(values)]);
    const heights = curves.flatMap(([, list]) => list.map(([, value]) => value));
    const [low, high] = [Math.min(...heights), Math.max(...heights) + 1e-9];
    for (const [color, list] of curves) {
      const d = list.map(([ppm, value], k) => `${k ? 'L' : 'M'}${place(ppm).toFixed(1)},${(280 - (262 * (value - low)) / (high - low)).toFixed(1)}`).join('');
      draw('path', { d, fill: 'none', stroke: color, 'stroke-width': '1.3' });
    }
    draw('line', { x1: 20, x2: 880, y1: 288, y2: 288, stroke: '#5a5a5a' });
    for (let k = 0; k <= 6; k += 1) {
      const ppm = range[0] - (k * (range[0] - range[1])) / 6;
      const text = draw('text', { x: place(ppm), y: 304, fill: '#5a5a5a', 'text-anchor': 'middle', 'font-size': '13' });
      text.textContent = ppm.toFixed(range[0] - range[1] > 5 ? 1 : 3);
    }
    draw('text', { x: 450, y: 319, fill: '#222222', 'text-anchor': 'middle', 'font-size': '13' }).textContent = 'chemical shift / ppm';
  };
  const reset = () => {
    range = undefined;
    render();
  };
  let from;
  const ppmAt = (event) => {
    const box = svg.getBoundingClientRect();
    const x = (900 * (event.clientX - box.left)) / box.width;
    return range[0] - ((x - 20) / 860) * (range[0] - range[1]);
  };
  svg.addEventListener('pointerdown', (event) => {
    from = ppmAt(event);
    svg.setPointerCapture(event.pointerId);
  });
  svg.addEventListener('pointerup', (event) => {
    const to = ppmAt(event);
    if (from !== undefined && Math.abs(from - to) > (range[0] - range[1]) / 100) {
      range = [Math.min(range[0], Math.max(from, to)), Math.max(range[1], Math.min(from, to))];
      render();
    }
    from = undefined;
  });
  choose.addEventListener('change', () => {
    fillWhat();
    render();
  });
  what.addEventListener('change', reset);
  whole.addEventListener('click', reset);
  fillWhat();
  render();
})();
