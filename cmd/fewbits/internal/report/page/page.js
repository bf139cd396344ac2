'use strict';
(() => {
  const $ = id => document.getElementById(id);
  const data = JSON.parse($('data').textContent);

  // Switches: a set shows the picture whose turn is what its radios say.
  for (const set of document.querySelectorAll('.set')) {
    set.addEventListener('change', () => {
      const turn = [...set.querySelectorAll('input:checked')].map(i => i.value).join(' ');
      for (const f of set.querySelectorAll('figure')) f.hidden = f.dataset.turn !== turn;
    });
  }

  // Keys: an entry hides its line and brings it back.
  document.addEventListener('click', e => {
    const b = e.target.closest('.key button');
    if (!b) return;
    const show = b.getAttribute('aria-pressed') === 'false';
    b.setAttribute('aria-pressed', show);
    for (const g of b.closest('figure').querySelectorAll('[data-line]')) {
      if (g.dataset.line === b.dataset.for) g.classList.toggle('off', !show);
    }
  });

  // Tables: numbers by value, undefined ones last; words by letter.
  const number = cell => {
    const text = cell.dataset.v ?? cell.textContent;
    const v = parseFloat(text.replace('−', '-').replace('<', ''));
    return Number.isNaN(v) ? null : v;
  };
  const compare = (words, down) => (x, y) => {
    if (words) {
      const c = x.cell.textContent.localeCompare(y.cell.textContent, 'en', { numeric: true });
      return down ? -c : c;
    }
    const a = number(x.cell), b = number(y.cell);
    if (a === null || b === null) return (a === null) - (b === null);
    return down ? b - a : a - b;
  };
  const sort = button => {
    const th = button.closest('th'), body = th.closest('table').tBodies[0];
    const words = th.classList.contains('w');
    const was = th.getAttribute('aria-sort');
    const down = was ? was === 'ascending' : !words;
    for (const other of th.parentNode.children) other.removeAttribute('aria-sort');
    th.setAttribute('aria-sort', down ? 'descending' : 'ascending');
    const rows = [...body.rows].map(row => ({ row, cell: row.cells[th.cellIndex] }));
    body.append(...rows.sort(compare(words, down)).map(r => r.row));
  };
  document.addEventListener('click', e => {
    const b = e.target.closest('.sortable thead button');
    if (b) sort(b);
  });

  // One figure for each recording and design.
  const figure = $('pick-figure');
  if (figure) figure.addEventListener('change', () => {
    const cells = data.figures[figure.value], n = data.designs.length;
    const table = $('grid-each');
    for (const th of table.tHead.rows[0].cells) th.removeAttribute('aria-sort');
    const rows = new Map([...table.tBodies[0].rows].map(r => [r.cells[0].textContent, r]));
    data.clips.forEach((file, i) => {
      const row = rows.get(file);
      for (let j = 0; j < n; j++) row.cells[j + 1].textContent = cells[i * n + j] ?? '–';
      table.tBodies[0].append(row);
    });
  });

  if (!data.tracks || !data.tracks.length) return;

  // Over time.
  const g = data.place, svg = $('time-picture'), says = $('time-says');
  const part = name => svg.querySelector(`[data-part="${name}"]`);
  const bytes = s => Uint8Array.from(atob(s), c => c.charCodeAt(0));
  const clip = $('pick-clip'), pick = { a: $('pick-a'), b: $('pick-b') };
  let now = null;

  const line = (v, x, y) => {
    let d = '', pen = 'M';
    v.forEach((b, i) => {
      if (b === 255) { pen = 'M'; return; }
      d += pen + x(i).toFixed(1) + ' ' + y(b).toFixed(1);
      pen = 'L';
    });
    return d;
  };
  const load = () => {
    const t = data.tracks[clip.value];
    now = { t, min: bytes(t.min), max: bytes(t.max), level: bytes(t.level), a: bytes(t.snr[pick.a.value]), b: bytes(t.snr[pick.b.value]) };
    now.end = now.max.length * t.step;
  };
  const across = s => g.left + s / now.end * (g.right - g.left);
  const up = (v, [foot, top, lo, hi]) => foot + (Math.min(hi, Math.max(lo, v)) - lo) / (hi - lo) * (top - foot);
  const level = b => b / 2 - 100, snr = b => b / 2 - 20;

  const paint = () => {
    const x = i => across((i + 0.5) * now.t.step);
    const wave = b => up((b - 128) / 127, g.wave);
    const back = [...now.min.keys()].reverse().filter(i => now.min[i] !== 255).map(i => 'L' + x(i).toFixed(1) + ' ' + wave(now.min[i]).toFixed(1)).join('');
    const there = line(now.max, x, wave);
    part('wave').setAttribute('d', there ? there.replace(/(?!^)M/g, 'L') + back + 'Z' : '');
    part('level').setAttribute('d', line(now.level, x, b => up(level(b), g.level)));
    part('a').setAttribute('d', line(now.a, x, b => up(snr(b), g.frames)));
    part('b').setAttribute('d', line(now.b, x, b => up(snr(b), g.frames)));
    part('peak').textContent = 'peak ' + (Math.round(20 * Math.log10(now.t.peak)) || 0).toFixed(0).replace('-', '−') + ' dB';
    ticks();
    const names = [pick.a, pick.b].map(s => s.selectedOptions[0].textContent);
    $('time-key').querySelectorAll('li').forEach((li, i) => { li.lastChild.textContent = ' ' + 'AB'[i] + ' ' + names[i]; });
    svg.querySelector('title').textContent = 'Over time: ' + now.t.file;
    svg.querySelector('desc').textContent = `Waveform, level and SNR of ${now.t.file} over ${now.end.toFixed(1)} seconds, coded by ${names[0]} (A) and ${names[1]} (B).`;
  };
  const ticks = () => {
    const group = part('ticks'), model = group.firstElementChild;
    const raw = now.end / 8, ten = 10 ** Math.floor(Math.log10(raw));
    const step = [1, 2, 5, 10].map(m => m * ten).find(s => s >= raw * (1 - 1e-9));
    const made = [];
    for (let k = 0; k * step <= now.end * (1 + 1e-9); k++) {
      const t = model.cloneNode(true);
      t.setAttribute('x', across(k * step).toFixed(1));
      t.textContent = (k * step).toFixed(Math.max(0, Math.ceil(-Math.log10(step) - 1e-9)));
      made.push(t);
    }
    group.replaceChildren(...made);
  };
  const cursor = s => {
    const x = across(Math.min(s, now.end)).toFixed(1);
    part('cursor').setAttribute('d', `M${x} ${g.wave[1]}L${x} ${g.frames[0]}`);
    svg.dataset.seconds = s.toFixed(3);
    const i = Math.min(now.max.length - 1, Math.floor(s / now.t.step));
    const tell = (b, f, unit) => b === 255 || b === undefined ? '–' : f(b).toFixed(1).replace('-', '−') + unit;
    says.textContent = `${s.toFixed(2)} s: level ${tell(now.level[i], level, ' dBov')}, A ${tell(now.a[i], snr, ' dB')}, B ${tell(now.b[i], snr, ' dB')}`;
  };

  const player = $('player');
  const source = () => {
    const which = document.querySelector('#hear input:checked').value;
    const design = data.designs[pick[which[0]].value];
    return ['audio', now.t.name, design.name + (which[1] ? '.error' : '') + '.wav'].map(encodeURIComponent).join('/');
  };
  // Another source goes on from where the last one was, or from the start with
  // another recording.
  const cue = keep => {
    if (!player) return;
    const want = source();
    if (player.getAttribute('src') === want) return;
    const at = keep ? player.currentTime : 0, playing = !player.paused;
    $('player-says').textContent = '';
    player.src = want;
    if (at > 0) player.addEventListener('loadedmetadata', () => { player.currentTime = at; }, { once: true });
    if (at > 0) player.load();
    if (playing) player.play().catch(() => {});
    if (!keep) cursor(0);
  };
  clip.addEventListener('change', () => { load(); paint(); cue(false); cursor(0); });
  for (const s of [pick.a, pick.b]) s.addEventListener('change', () => { load(); paint(); cue(true); });
  load();
  paint();
  cursor(0);
  const at = e => {
    const box = svg.getBoundingClientRect();
    const x = (e.clientX - box.left) / box.width * svg.viewBox.baseVal.width;
    return Math.min(now.end, Math.max(0, (x - g.left) / (g.right - g.left) * now.end));
  };
  if (!player) {
    svg.addEventListener('click', e => cursor(at(e)));
    return;
  }
  cue(false);
  $('hear').addEventListener('change', () => cue(true));
  player.addEventListener('error', () => {
    $('player-says').textContent = 'This sound cannot be played: ' + player.getAttribute('src') + ' is not beside the page, or is in a form this browser does not know.';
  });
  const follow = () => {
    cursor(player.currentTime);
    if (!player.paused && !player.ended) requestAnimationFrame(follow);
  };
  player.addEventListener('play', follow);
  player.addEventListener('seeked', () => cursor(player.currentTime));
  svg.addEventListener('click', e => {
    const s = at(e);
    if (player.readyState === 0) {
      player.addEventListener('loadedmetadata', () => { player.currentTime = s; }, { once: true });
      player.load();
    } else {
      player.currentTime = s;
    }
    cursor(s);
  });
})();
