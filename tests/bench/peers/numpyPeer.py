"""The same jobs in NumPy complex128 as a good engineer would write them: whole-array calls, its own tables (made before
the clock starts), buffers kept between rounds. Two ways to the points (a third for W3: all samples kept); the bench takes the
fastest way. Reads lines "W1", "W1 file", ...; answers one line of JSON per round: ways { name: ms }, peak, meanPower, firstWords."""
import json
import os
import sys
import time

import numpy as np

OUTPUT = sys.argv[1]
PERIOD = 32767


def pn15():
    """ITU-T O.150: b(t) = b(t-14) ^ b(t-15), all ones first, inverted."""
    bits = np.ones(PERIOD, dtype=np.uint8)
    for t in range(15, PERIOD):
        bits[t] = bits[t - 14] ^ bits[t - 15]
    return 1 - bits


def ts38211(bits):
    """Points by bit word, first bit most significant (TS 38.211 5.1)."""
    half = bits // 2
    words = np.arange(1 << bits)
    levels = []
    for first in (0, 1):
        level = np.zeros(1 << bits)
        size = 1
        for i in reversed(range(half)):
            sign = 1 - 2 * ((words >> (bits - 1 - (2 * i + first))) & 1)
            level = sign * (size - level) if size > 1 else sign * np.ones(1 << bits)
            size *= 2
        levels.append(level)
    norm = np.sqrt(2 * ((1 << bits) - 1) / 3)
    return (levels[0] + 1j * levels[1]) / norm


PN = pn15()
QPSK, QAM64 = ts38211(2), ts38211(6)
# second way: the word, and so the point, that begins at each bit of the period
AT = np.arange(PERIOD)
WORD2 = sum(PN[(AT + i) % PERIOD].astype(np.int64) << (1 - i) for i in range(2))
WORD6 = sum(PN[(AT + i) % PERIOD].astype(np.int64) << (5 - i) for i in range(6))
QPSK_AT, QAM64_AT = QPSK[WORD2], QAM64[WORD6]
WEIGHT2, WEIGHT6 = 1 << np.arange(1, -1, -1), 1 << np.arange(5, -1, -1)


class Small:
    """W1, and one repeat of W3."""

    N, L = 2048, 140
    PREFIXES = [160] + 6 * [144]
    SLOT = sum(PREFIXES) + 7 * 2048

    def __init__(self):
        self.grid = np.zeros((self.L, self.N), dtype=complex)
        self.wave = np.empty((self.L // 7, self.SLOT), dtype=complex)
        self.bits_per_repeat = self.L * 4800
        start = 4800 * np.arange(self.L)[:, None]
        self.place_low = start + 2 * np.arange(600)
        self.place_high = start + 1200 + 6 * np.arange(600)

    def points_from_bits(self, repeat):
        first = repeat * self.bits_per_repeat % PERIOD
        bits = np.resize(np.concatenate((PN[first:], PN[:first])), self.bits_per_repeat).reshape(self.L, 4800)
        low = QPSK[(bits[:, 0:1200:2] << 1) | bits[:, 1:1200:2]]
        six = bits[:, 1200:].reshape(self.L, 600, 6)
        word = (six[..., 0] << 5) | (six[..., 1] << 4) | (six[..., 2] << 3) | (six[..., 3] << 2) | (six[..., 4] << 1) | six[..., 5]
        return low, QAM64[word]

    def points_from_places(self, repeat):
        first = repeat * self.bits_per_repeat
        return QPSK_AT[(self.place_low + first) % PERIOD], QAM64_AT[(self.place_high + first) % PERIOD]

    def render(self, repeat, way):
        low, high = (self.points_from_bits if way == 0 else self.points_from_places)(repeat)
        # ascending subcarriers -600..-1 and 1..600
        self.grid[:, self.N - 600 :] = low
        self.grid[:, 1:601] = high
        useful = np.fft.ifft(self.grid, axis=1, norm="ortho").reshape(-1, 7, self.N)
        at = 0
        for symbol, prefix in enumerate(self.PREFIXES):
            self.wave[:, at : at + prefix] = useful[:, symbol, -prefix:]
            self.wave[:, at + prefix : at + prefix + self.N] = useful[:, symbol]
            at += prefix + self.N
        return self.wave.reshape(-1)


class Large:
    """W2: N 4096 fourfold."""

    N, M, L, K, PREFIX = 4096, 4, 14, 3276, 288

    def __init__(self):
        size = self.N * self.M
        self.grid = np.zeros((self.L, size), dtype=complex)
        self.wave = np.empty((self.L, size + self.PREFIX * self.M), dtype=complex)
        self.place = 6 * self.K * np.arange(self.L)[:, None] + 6 * np.arange(self.K)

    def render(self, _repeat, way):
        if way == 0:
            six = np.resize(PN, self.L * self.K * 6).reshape(self.L, self.K, 6)
            word = (six[..., 0] << 5) | (six[..., 1] << 4) | (six[..., 2] << 3) | (six[..., 3] << 2) | (six[..., 4] << 1) | six[..., 5]
            points = QAM64[word]
        else:
            points = QAM64_AT[self.place % PERIOD]
        half = self.K // 2
        self.grid[:, -half:] = points[:, :half]
        self.grid[:, :half] = points[:, half:]
        useful = np.fft.ifft(self.grid, axis=1)
        useful *= self.N * self.M / np.sqrt(self.N)
        prefix = self.PREFIX * self.M
        self.wave[:, :prefix] = useful[:, -prefix:]
        self.wave[:, prefix:] = useful
        return self.wave.reshape(-1)


JOBS = {"W1": (Small(), 1), "W2": (Large(), 1), "W3": (Small(), 72)}
HEADROOM = 10 ** (-1 / 20)


def levels(wave):
    power = np.square(wave.real)
    power += np.square(wave.imag)
    return power.max(), power.sum()


def to_words(wave, scale):
    scaled = wave.view(float) * scale
    np.rint(scaled, out=scaled)
    return scaled.astype("<i2")


def job(name, to_file, way):
    renderer, repeats = JOBS[name]
    start = time.perf_counter()
    peak = total = count = 0
    kept = None
    for repeat in range(repeats):
        wave = renderer.render(repeat, way)
        largest, summed = levels(wave)
        peak, total, count = max(peak, largest), total + summed, count + wave.size
        kept = wave
    scale = 32767 * HEADROOM / np.sqrt(peak)
    file = open(OUTPUT, "wb", buffering=0) if to_file else None
    words = None
    for repeat in range(repeats):
        # a single repeat is still there; 72 of them (350 MB) are made again, as a limited memory asks of both
        block = to_words(kept if repeats == 1 else renderer.render(repeat, way), scale)
        words = block[:8].copy() if words is None else words
        if file:
            file.write(block.data)
    if file:
        os.fsync(file.fileno())
        file.close()
    ms = 1000 * (time.perf_counter() - start)
    return {"ms": ms, "peak": float(np.sqrt(peak)), "meanPower": float(total / count), "firstWords": words.tolist()}


def job_in_memory(name, to_file, way):
    """W3 with all samples kept: more memory, one rendering."""
    renderer, repeats = JOBS[name]
    start = time.perf_counter()
    peak = total = count = 0
    kept = []
    for repeat in range(repeats):
        wave = renderer.render(repeat, way).copy()
        largest, summed = levels(wave)
        peak, total, count = max(peak, largest), total + summed, count + wave.size
        kept.append(wave)
    scale = 32767 * HEADROOM / np.sqrt(peak)
    file = open(OUTPUT, "wb", buffering=0) if to_file else None
    words = None
    for wave in kept:
        block = to_words(wave, scale)
        words = block[:8].copy() if words is None else words
        if file:
            file.write(block.data)
    if file:
        os.fsync(file.fileno())
        file.close()
    ms = 1000 * (time.perf_counter() - start)
    return {"ms": ms, "peak": float(np.sqrt(peak)), "meanPower": float(total / count), "firstWords": words.tolist()}


WAYS = {"bits": lambda name, to_file: job(name, to_file, 0), "places": lambda name, to_file: job(name, to_file, 1)}

for line in sys.stdin:
    parts = line.split()
    name, to_file = parts[0], len(parts) > 1
    results = {way: run(name, to_file) for way, run in WAYS.items()}
    if name == "W3":
        results["kept"] = job_in_memory(name, to_file, 1)
    last = list(results.values())[-1]
    print(json.dumps({**last, "ways": {way: result["ms"] for way, result in results.items()}}), flush=True)
