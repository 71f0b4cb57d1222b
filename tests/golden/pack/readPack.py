"""Reads a pack with Python's zipfile and NumPy alone and says what it found, as JSON.

Usage: readPack.py pack.zip. Independent of the program: no code of it is used, only the pack's own files.
"""
import csv
import hashlib
import io
import json
import sys
import zipfile

import numpy as np

pack = zipfile.ZipFile(sys.argv[1])
bad = pack.testzip()
read = pack.read
manifest = json.loads(read('manifest.json'))
content = json.loads(read('document.combwright.json'))['content']
word = manifest['word']

digests_wrong = [
    f['name']
    for f in manifest['files']
    if hashlib.sha256(read(f['name'])).hexdigest() != f['sha256'] or len(read(f['name'])) != f['bytes']
]
names = [i.filename for i in pack.infolist()]
listed = [f['name'] for f in manifest['files']]
dates = sorted({i.date_time for i in pack.infolist()})

vector = manifest['files'][0]
kind = {'int16': 'i2', 'float32': 'f4'}[word['word']]
order = {'little': '<', 'big': '>'}[word['byteOrder']]
raw = np.frombuffer(read(vector['name']), order + kind).astype(float) / 2 ** word['shiftBits']
first = raw[:8].tolist()
x = (raw[0::2] + 1j * raw[1::2]) / word['scaleLsbPerUnit']

# every cell of the first repeat: value from reference.cf32, bits from its payload file by cells.csv and the map of the manifest
reference = np.frombuffer(read('reference.cf32'), '<c8')
inks = {ink['inkId']: ink for ink in manifest['inks']}
payload = {
    stream['streamId']: np.unpackbits(np.frombuffer(read(stream['fileName']), 'u1'))
    for stream in manifest['streams']
    if stream['fileName']
}
bits_wrong = [s['streamId'] for s in manifest['streams'] if s['fileName'] and payload[s['streamId']][: s['bits']].sum() != s['ones']]
worst_map = 0.0
mapped = 0
if 'cells.csv' in names:
    rows = list(csv.DictReader(io.StringIO(read('cells.csv').decode())))
    for index, row in enumerate(rows):
        ink = inks[row['ink']]
        if ink['role'] != 'data' or ink['map']['constellation'] == 'pi2-bpsk':
            continue
        at = int(row['firstBit'])
        bits = payload[row['stream']][at : at + ink['map']['bitsPerCell']]
        point = ink['map']['points'][int(''.join(map(str, bits)), 2)]
        value = (point['i'] + 1j * point['q']) * 10 ** (ink['powerDb'] / 20)
        worst_map = max(worst_map, abs(value - reference[index]))
        mapped += 1

markers_wrong = 0
for f in manifest['files']:
    if f['role'] != 'markers':
        continue
    found = np.frombuffer(read(f['name']), 'u1')
    expected = np.zeros(manifest['samples']['fileSamples'], 'u1')
    for marker in manifest['markers']:
        for mark in marker['ranges']:
            expected[mark['startSample'] : mark['startSample'] + mark['lengthSamples']] |= 1 << marker['marker']
    markers_wrong = int(np.count_nonzero(found != expected)) if found.size == expected.size else -1

active = manifest['samples']['activeSamples']
rms = np.sqrt(np.mean(np.abs(raw[0::2] + 1j * raw[1::2]) ** 2))
print(
    json.dumps(
        {
            'bad': bad,
            'names': names,
            'listed': listed,
            'dates': dates,
            'digestsWrong': digests_wrong,
            'samples': int(x.size),
            'first': first,
            'bitsWrong': bits_wrong,
            'worstMap': float(worst_map),
            'mapped': mapped,
            'markersWrong': markers_wrong,
            'rmsDbfs': float(20 * np.log10(rms / word['fullScale'])),
            'activeRmsDbfs': float(20 * np.log10(rms * np.sqrt(x.size / active) / word['fullScale'])),
            'dcI': float(np.mean(raw[0::2]) / word['fullScale']),
        }
    )
)
