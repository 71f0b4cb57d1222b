import type { PackDetail } from '@/lib/contracts/packs';

const escapes: Record<string, string> = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };
const text = (value: string) => value.replace(/[&<>"']/g, (character) => escapes[character]!);
const minus = (value: string) => value.replace('-', '−');
const dbm = (value: number | null, none: string, digits = 1) =>
  value === null ? `<b class="none">${none}</b>` : `<b>${minus(value.toFixed(digits))}</b> dBm`;
/** Groups of eight: read aloud and compared by eye. */
const groups = (hex: string) => (hex.match(/.{1,8}/g) ?? []).join(' ');
const time = (ms: number) => `${new Date(ms).toISOString().slice(0, 16).replace('T', ' ')} UTC`;
const megahertz = (hz: number) => `${Number((hz / 1e6).toFixed(6))} MHz`;

/** Both themes of the product's paper; the app's own look replaces it once it is there. */
export const operatorStyle = `
#plain{--desk:#EDE6D8;--sheet:#FBF8F1;--ink:#121C33;--quiet:#525B70;--rule:#24304A;--hair:#DED5C3;--solid:#1B2947;--on:#FFFDF8;
--danger:#9B1F2B;--dangerWash:#F8E3DF;--warning:#7A4B00;--warningWash:#F8E8C6;--link:#1F4F9E;
box-sizing:border-box;width:100%;height:100%;overflow:auto;background:var(--desk);color:var(--ink);font:16px/1.45 system-ui,sans-serif}
@media(prefers-color-scheme:dark){#plain{--desk:#0D1526;--sheet:#14203A;--ink:#EEF1F8;--quiet:#AEB8CF;--rule:#C9D3E8;--hair:#2B3A5C;--solid:#C9D6F5;--on:#0F1930;
--danger:#FF9C9C;--dangerWash:#3A1D28;--warning:#F2C46D;--warningWash:#352B18;--link:#9DBBFF}}
#plain *{box-sizing:border-box}#plain main{max-width:520px;margin:0 auto;padding:12px 16px 0;background:var(--sheet);min-height:100%}
#plain h1{font-size:22px;line-height:1.25;margin:0 0 4px}#plain h2{font-size:15px;margin:20px 0 4px}#plain p{margin:6px 0}
#plain .stamp{display:inline-block;border:3px double;padding:1px 8px;font-size:12px;font-weight:700;text-transform:uppercase}
#plain .draft{border:2px dashed}#plain .withdrawn{border:1px solid;border-bottom-width:4px;color:var(--danger)}
#plain code,#plain b{font-family:ui-monospace,monospace;font-variant-numeric:tabular-nums}#plain code{word-break:break-word}
#plain .big b{font-size:34px}#plain .mid b{font-size:22px}#plain .none{font-size:18px!important;font-family:inherit}
#plain dl{display:grid;grid-template-columns:1fr 1fr;gap:0 12px;margin:4px 0}#plain dt{color:var(--quiet);font-size:13px;margin-top:4px}#plain dd{margin:0;line-height:1.2}
#plain hr{border:0;border-top:2px solid var(--rule);margin:8px 0 0}#plain .quiet{color:var(--quiet);font-size:13px}
#plain .notice{border-left:3px solid var(--danger);background:var(--dangerWash);padding:8px 13px;color:var(--danger);font-weight:600}
#plain ol{margin:0;padding-left:28px}#plain ol.first{border-left:3px solid var(--warning);background:var(--warningWash);padding:6px 13px 6px 32px}
#plain li{margin:4px 0}#plain .severe{color:var(--danger);font-weight:600}
#plain summary{min-height:44px;padding:10px 0;cursor:pointer;color:var(--link)}
#plain .get{display:block;text-align:center;background:var(--solid);color:var(--on);padding:13px;margin:12px 0 0;text-decoration:none;font-weight:600;min-height:48px}
#plain .foot{position:sticky;bottom:0;background:var(--sheet);padding:4px 0 12px}
#plain .over{background:var(--dangerWash);padding:0 8px}`.replace(/\n/g, '');

type Card = Pick<PackDetail, 'card' | 'cautions'>;

function cardHtml({ card }: Card): string {
  const tolerance =
    card.highestSettingDbm === null ? '' : `<dd class="quiet">${card.levelToleranceDb} dB kept for error</dd>`;
  const readings =
    card.readings.length < 2
      ? ''
      : `<p>The profile does not say what the setting means. The highest level counts:</p><ul>${card.readings
          .map(
            (one) =>
              `<li>as ${text(one.words)}: peak ${dbm(one.peakNowDbm, 'unknown')}, highest setting ${dbm(one.highestSettingDbm, 'none')}</li>`,
          )
          .join('')}</ul>`;
  return `<section class="${card.verdict === 'over' ? 'over' : ''}" aria-label="Level card"><dl>
<div><dt>Set on the generator</dt><dd class="big">${dbm(card.settingDbm, 'Not given')}</dd><dd class="quiet">${text(card.settingWords)}</dd></div>
<div><dt>Highest setting</dt><dd class="mid">${dbm(card.highestSettingDbm, 'No limit given')}</dd>${tolerance}</div></dl><hr>
<p class="quiet">At the device’s connector, after attenuator and cable</p><dl>
<div><dt>Peak now</dt><dd class="big">${dbm(card.peakNowDbm, 'Not known')}</dd></div>
<div><dt>Peak limit</dt><dd class="mid">${dbm(card.peakLimitDbm, 'No limit given')}</dd></div>
<div><dt>Mean</dt><dd class="mid">${dbm(card.meanNowDbm, 'Not known')}</dd></div>
<div><dt>Mean limit</dt><dd class="mid">${dbm(card.meanLimitDbm, 'No limit given')}</dd></div></dl>
<p class="${card.verdict === 'inside' ? '' : 'severe'}">${text(card.sentence)}</p>${readings}</section>`;
}

function settingsHtml({ card }: Card): string {
  const peak = card.peakDbfs === null ? 'none' : `${minus(card.peakDbfs.toFixed(2))} dBFS`;
  return `<dl><div><dt>Loss before it</dt><dd><b>${card.lossDb}</b> dB</dd></div>
<div><dt>Sample clock</dt><dd><b>${megahertz(card.sampleClockHz)}</b></dd></div>
<div><dt>Peak in the file</dt><dd><b>${peak}</b></dd></div></dl>`;
}

const points = (cautions: PackDetail['cautions']) =>
  cautions
    .map(
      ({ number, text: words, severe }) =>
        `<li value="${number}"${severe ? ' class="severe"' : ''}>${text(words)}</li>`,
    )
    .join('');

/** The pack's page in plain HTML: what must be read before a device is connected is there before any script. */
export function operatorHtml(pack: PackDetail, downloadAddress: string): string {
  const stamp =
    pack.state === 'draft'
      ? 'Draft, not for the bench'
      : `${pack.state === 'withdrawn' ? 'Withdrawn' : 'Released'}, edition ${pack.editionNumber}`;
  const head = `<h1>${text(pack.title)}</h1>
<p><span class="stamp ${pack.state}">${stamp}</span> <span class="quiet">card fetched ${time(pack.fetchedAtMs)}</span></p>
<p class="quiet">Bench profile ${text(pack.bench.name)}, version ${pack.bench.version}</p>
<p class="quiet">SHA-256 of the vector <code>${groups(pack.vectorDigest.replace('sha256:', ''))}</code></p>`;
  if (pack.state === 'withdrawn')
    return `<div id="plain"><main>${head}<p class="notice" role="alert">Do not use this pack. ${text(pack.withdrawn?.reason ?? '')}</p></main></div>`;
  // The newest alone: the page stays small however often limits were entered, and the app lists the others.
  const device = pack.deviceCards[0];
  const entered = device
    ? `<h2>${text(device.deviceName)}</h2><p class="quiet">limits entered by ${text(device.enteredBy.name)}, ${time(device.enteredAtMs)}; the pack’s own card stands above</p>${cardHtml(device)}`
    : '';
  return `<div id="plain"><main>${head}${cardHtml(pack)}
<h2>First cautions</h2><ol class="first">${points(pack.cautions.filter(({ number }) => number === 3 || number === 4))}</ol>
${settingsHtml(pack)}
${pack.notices.map((notice) => `<p class="severe">${text(notice)}</p>`).join('')}
<p class="quiet">${text(pack.fileName)}, ${pack.fileBytes} bytes, SHA-256 <code>${groups(pack.fileDigest.replace('sha256:', ''))}</code></p>
<details><summary>All cautions, ${pack.cautions.length}</summary><ol>${points(pack.cautions)}</ol></details>${entered}
<div class="foot"><a class="get" href="${text(downloadAddress)}">Download pack</a></div></main></div>`;
}
