/** The desk's page, style and script; small enough to be served as they are. */

export const DESK_PAGE = `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light dark">
<title>Stillroom demo desk</title>
<link rel="stylesheet" href="/desk.css">
</head>
<body>
<header><h1>Demo desk</h1><a id="pages" href="#">Open Stillroom</a></header>
<main>
<section aria-labelledby="time-h"><h2 id="time-h">Time</h2>
<p>The demo’s time is <strong id="clock">…</strong>, running at <strong id="speed">…</strong>.</p>
<div id="speeds" class="row" role="group" aria-label="Speed"></div>
<p class="quiet">Higher speeds play days in minutes. The demo’s time never runs backwards.</p></section>
<section aria-labelledby="rooms-h"><h2 id="rooms-h">Rooms and sensors</h2>
<p class="quiet">What the simulated rooms really are. Push one, or break a sensor, and watch Stillroom notice.</p>
<div id="rooms"></div></section>
<section aria-labelledby="mail-h"><h2 id="mail-h">Mailbox</h2>
<p class="quiet">Every mail the demo sends ends here; none leaves this machine.</p>
<div class="row"><button id="clear" type="button">Empty the mailbox</button><span id="count" role="status"></span></div>
<div id="mails"></div></section>
</main>
<p id="trouble" role="alert"></p>
<script src="/desk.js"></script>
</body>
</html>
`;

export const DESK_STYLE = `@font-face{font-family:"Roboto Condensed";src:url(/roboto-condensed.woff2) format("woff2");font-display:swap}
:root{color-scheme:light dark;--ground:light-dark(#f6f2e9,#0e1d19);--sheet:light-dark(#fdfbf6,#14271f);--ink:light-dark(#16302a,#ece7d8);
--quiet:light-dark(#4c5f58,#a8b5ab);--line:light-dark(#d9d2c2,#2c4238);--copper:light-dark(#9a4f1e,#e39a63)}
*{box-sizing:border-box}
body{margin:0;background:var(--ground);color:var(--ink);font:16px/1.4 "Roboto Condensed",sans-serif;font-variant-numeric:tabular-nums}
header{display:flex;gap:16px;align-items:baseline;padding:16px;border-bottom:1px solid var(--line)}
h1{font-size:26px;margin:0}h2{font-size:19px;margin:0 0 8px}h3{font-size:17px;margin:0}
main{display:grid;gap:24px;padding:16px;max-width:1100px}
section{background:var(--sheet);border-top:2px solid var(--copper);padding:16px}
p{margin:0 0 8px}.quiet{color:var(--quiet)}
a{color:var(--copper)}
.row{display:flex;flex-wrap:wrap;gap:8px;align-items:center;margin:0 0 8px}
button,select{font:inherit;color:inherit;background:var(--sheet);border:1px solid var(--quiet);border-radius:3px;padding:8px 12px;min-height:44px}
button[aria-pressed=true]{background:var(--ink);color:var(--sheet)}
:focus-visible{outline:3px solid var(--copper);outline-offset:2px}
.room{border-top:1px solid var(--line);padding:12px 0}
.sensor{display:flex;flex-wrap:wrap;gap:8px;align-items:center;margin-top:6px}
.sensor label{flex:1 1 180px}
article{border-top:1px solid var(--line);padding:12px 0}
pre{white-space:pre-wrap;overflow-wrap:anywhere;font:inherit;margin:8px 0 0}
#trouble{padding:0 16px;color:light-dark(#a3232f,#ff9a94)}
`;

export const DESK_SCRIPT = `'use strict';
const by = (id) => document.getElementById(id);
const make = (tag, text, attributes = {}) => {
  const element = document.createElement(tag);
  if (text) element.textContent = text;
  for (const [name, value] of Object.entries(attributes)) element.setAttribute(name, value);
  return element;
};
const ask = async (path, method = 'GET', body) => {
  try {
    const answer = await fetch(path, {
      method,
      headers: method === 'GET' ? {} : { 'Content-Type': 'application/json' },
      body: body === undefined ? (method === 'GET' ? undefined : '{}') : JSON.stringify(body),
    });
    by('trouble').textContent = answer.ok ? '' : (await answer.json()).error;
    return answer.ok ? answer.json() : null;
  } catch {
    by('trouble').textContent = 'The simulator does not answer. Is Stillroom still running?';
    return null;
  }
};
const faults = { '': 'works', silent: 'silent', stuck: 'stuck on one value', drifting: 'drifting', spiking: 'spiking', 'wrong-clock': 'clock three hours ahead', 'battery-low': 'battery low' };
const pushes = { warmer: 'Warmer', colder: 'Colder', damp: 'Damp', normal: 'Leave alone' };
let drawn = '';
const drawClock = (clock) => {
  if (!clock) return;
  by('clock').textContent = clock.domainAt.replace('T', ' ').slice(0, 19) + ' UTC';
  by('speed').textContent = clock.speed === 1 ? 'real time' : clock.speed + ' times real time';
  by('pages').href = clock.pagesUrl;
  if (by('speeds').childElementCount === 0) {
    for (const speed of clock.speeds) {
      const button = make('button', speed === 1 ? 'Real time' : speed + '×', { type: 'button', 'data-speed': speed });
      button.onclick = async () => drawClock(await ask('/desk/api/speed', 'POST', { speed }));
      by('speeds').append(button);
    }
  }
  for (const button of by('speeds').children) button.setAttribute('aria-pressed', String(Number(button.dataset.speed) === clock.speed));
};
const drawRooms = (rooms) => {
  if (!rooms) return;
  const shape = JSON.stringify(rooms.map((room) => [room.key, room.push, room.sensors]));
  if (shape !== drawn) {
    drawn = shape;
    by('rooms').replaceChildren(...rooms.map((room) => {
      const box = make('div', '', { class: 'room' });
      box.append(make('h3', room.studio + ', ' + room.name), make('p', '', { 'data-air': room.key }));
      const row = make('div', '', { class: 'row', role: 'group', 'aria-label': 'Push ' + room.name });
      for (const [push, label] of Object.entries(pushes)) {
        const button = make('button', label, { type: 'button', 'aria-pressed': String(room.push === push) });
        button.onclick = async () => drawRooms(await ask('/desk/api/rooms/' + room.key + '/push', 'POST', { push }));
        row.append(button);
      }
      box.append(row);
      for (const sensor of room.sensors) {
        const line = make('div', '', { class: 'sensor' });
        const select = make('select', '', { id: sensor.deviceId });
        for (const [fault, label] of Object.entries(faults)) select.append(make('option', label, { value: fault }));
        select.value = sensor.fault ?? '';
        select.onchange = async () => drawRooms(await ask('/desk/api/sensors/' + sensor.deviceId + '/fault', 'POST', { fault: select.value || null }));
        line.append(make('label', sensor.name, { for: sensor.deviceId }), select);
        box.append(line);
      }
      return box;
    }));
  }
  for (const room of rooms) {
    const air = document.querySelector('[data-air="' + room.key + '"]');
    if (air) air.textContent = room.celsius.toFixed(1) + ' °C, ' + Math.round(room.humidity) + ' %';
  }
};
let newest = -1;
const drawMails = (mails) => {
  if (!mails) return;
  const latest = mails.length === 0 ? 0 : mails[0].id;
  if (latest === newest) return;
  newest = latest;
  by('count').textContent = mails.length === 0 ? 'No mail yet.' : mails.length === 1 ? '1 mail' : mails.length + ' mails';
  by('mails').replaceChildren(...mails.map((mail) => {
    const article = make('article');
    article.append(make('h3', mail.subject), make('p', 'To ' + mail.to + ', ' + mail.at.slice(11, 19) + ' UTC', { class: 'quiet' }));
    const text = make('pre');
    for (const part of mail.text.split(/(https?:\\/\\/\\S+)/)) {
      text.append(/^https?:/.test(part) ? make('a', part, { href: part }) : part);
    }
    article.append(text);
    return article;
  }));
};
by('clear').onclick = async () => drawMails(await ask('/desk/api/messages', 'DELETE'));
const look = async () => {
  drawClock(await ask('/desk/api/clock'));
  drawRooms(await ask('/desk/api/rooms'));
  drawMails(await ask('/desk/api/messages'));
  setTimeout(look, 1000);
};
look();
`;
