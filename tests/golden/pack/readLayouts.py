"""Reads the vectors of unzipped packs with programs that are not ours: NumPy, csv, struct, and the reader of README.txt.

Usage: readLayouts.py folder... Says, as JSON, for each folder: SHA-256 of the words as 16-bit little-endian numbers (floats: as
32-bit ones), I then Q as the document means them, once from NumPy and once from struct or csv; markers; what the README's reader says.
"""
import contextlib
import csv
import hashlib
import io
import json
import os
import struct
import sys

import numpy as np


def by_numpy(word, names):
    """Arrays as NumPy's own readers give them, as columns of what is stored."""
    kind = {'int8': 'i1', 'int16': 'i2', 'float32': 'f4'}[word['word']]
    if word['numberFormat'] == 'offsetBinary':
        kind = kind.replace('i', 'u')
    dtype = ('' if kind.endswith('1') else {'little': '<', 'big': '>'}[word['byteOrder']]) + kind
    loaded = []
    shapes = []
    for name in names:
        if word['container'] == 'npy':
            whole = np.load(name, mmap_mode='r')  # a memory map, as for files beyond memory
            assert whole.flags['C_CONTIGUOUS'] and np.array_equal(np.load(name), whole)
            shapes.append([str(whole.dtype), list(whole.shape)])
            if whole.dtype.kind == 'c':
                whole = np.stack([whole.real, whole.imag], 1)
        elif word['container'] == 'csv':
            whole = np.loadtxt(name, delimiter=',', skiprows=1, ndmin=2).astype('f4')
        else:
            head = {'raw': 0, 'wav': 58 if kind == 'f4' else 44}[word['container']]
            whole = np.memmap(name, dtype=dtype, mode='r', offset=head)
            assert np.array_equal(np.fromfile(name, dtype, offset=head), whole)
        loaded.append(np.asarray(whole).reshape(-1, 2 if len(names) == 1 else 1))
    return np.concatenate(loaded, 1), shapes


def by_struct(word, names):
    """The same a value at a time, with struct and csv alone."""
    columns = []
    for name in names:
        if word['container'] == 'csv':
            with open(name, newline='', encoding='ascii') as lines:
                rows = list(csv.reader(lines))
            assert {len(row) for row in rows} == {2 // len(names)}
            columns += [[float(row[c]) for row in rows[1:]] for c in range(len(rows[0]))]
            continue
        data = open(name, 'rb').read()
        letter = {'int8': 'b', 'int16': 'h', 'float32': 'f'}[word['word']]
        if word['numberFormat'] == 'offsetBinary':
            letter = letter.upper()
        if word['container'] == 'npy':
            data = data[10 + struct.unpack('<H', data[8:10])[0] :]
        if word['container'] == 'wav':
            riff, size, wave = struct.unpack('<4sI4s', data[:12])
            assert (riff, size, wave) == (b'RIFF', len(data) - 8, b'WAVE')
            at = 12
            while data[at : at + 4] != b'data':
                at += 8 + struct.unpack('<I', data[at + 4 : at + 8])[0]
            bytes_said = struct.unpack('<I', data[at + 4 : at + 8])[0]
            data = data[at + 8 :]
            assert bytes_said == len(data)
        order = {'little': '<', 'big': '>'}[word['byteOrder']]
        numbers = struct.unpack(order + str(len(data) // struct.calcsize(letter)) + letter, data)
        columns += [numbers] if len(names) == 2 else [numbers[0::2], numbers[1::2]]
    return np.array(columns).T


def meant(word, stored):
    """Numbers as the document means them, I first, and marker bits."""
    marks = np.zeros(len(stored), int)
    if word['word'] != 'float32':
        stored = stored.astype(int)
        low = stored & (2 ** word['shiftBits'] - 1)
        marks = low[:, 0] | low[:, 1] << word['shiftBits']
        stored = (stored >> word['shiftBits']) - (2 ** (word['bits'] - 1) if word['numberFormat'] == 'offsetBinary' else 0)
    i, q = (stored[:, 1], stored[:, 0]) if word['swapIq'] else (stored[:, 0], stored[:, 1])
    return np.stack([i, 0 - q if word['negateQ'] else q], 1), marks


def digest(word, numbers):
    kind = '<f4' if word['word'] == 'float32' else '<i2'
    return hashlib.sha256(np.ascontiguousarray(numbers.astype(kind)).tobytes()).hexdigest()


def read(folder):
    os.chdir(folder)
    manifest = json.load(open('manifest.json', encoding='utf-8'))
    word = manifest['word']
    names = [f['name'] for f in manifest['files'] if f['role'] in ('vector', 'vectorI', 'vectorQ')]
    first, shapes = by_numpy(word, names)
    numbers, marks = meant(word, first)
    ours = open('README.txt', encoding='utf-8').read()
    script = ours[ours.index('# ---- reader.py begins') : ours.index('# ---- reader.py ends')]
    said = io.StringIO()
    with contextlib.redirect_stdout(said):
        exec(compile(script, 'reader.py', 'exec'), {})
    vector = b''.join(open(name, 'rb').read() for name in names)
    return {
        'numpy': digest(word, numbers),
        'struct': digest(word, meant(word, by_struct(word, names))[0]),
        'samples': len(numbers),
        'shapes': shapes,
        'markers': hashlib.sha256(marks.astype('u1').tobytes()).hexdigest(),
        'vector': hashlib.sha256(vector).hexdigest(),
        'readerLines': len(script.strip().split('\n')),
        'said': said.getvalue().strip(),
    }


print(json.dumps([read(os.path.abspath(folder)) for folder in sys.argv[1:]]))
