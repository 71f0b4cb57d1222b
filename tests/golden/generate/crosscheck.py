"""An independent reading of the waveform document in NumPy: documents and rendered samples in, distances out.

    crosscheck.py directory

The directory holds, for each i: i.json (a document's content) and i.f64 (interleaved float64 samples, little-endian, as
rendered by the product). Prints a JSON list: samples, wholeDb (the file against double transforms), directDb (256 samples
against a long-double sum over subcarriers). Written from the document's and the signal's conventions alone; shares no code with
the product.
"""
import base64
import json
import math
import sys
from fractions import Fraction
from pathlib import Path

import numpy as np

LONG = np.longdouble
PI = LONG("3.14159265358979323846264338327950288")


# ---- bits ------------------------------------------------------------------------------------------------------------
class Register:
    def __init__(self, stages, taps, seed):
        self.taps, self.bits = taps, [(seed >> i) & 1 for i in range(stages)]
        self.stages = stages

    def upto(self, count):
        bits, taps = self.bits, self.taps
        while len(bits) < count:
            t = len(bits)
            value = 0
            for tap in taps:
                value ^= bits[t - tap]
            bits.append(value)
        return bits


class Gold:
    def __init__(self, c_init):
        self.first = Register(31, [28, 31], 1)
        self.second = Register(31, [28, 29, 30, 31], c_init)

    def upto(self, count):
        a, b = self.first.upto(count + 1600), self.second.upto(count + 1600)
        return [x ^ y for x, y in zip(a[1600 : 1600 + count], b[1600 : 1600 + count])]


def source_bits(source, count):
    kind = source["kind"]
    if kind == "pn":
        bits = Register(source["stages"], source["taps"], source["seed"]).upto(count)[:count]
        return [1 - bit for bit in bits] if source["inverted"] else bits
    if kind == "gold":
        return Gold(source["cInit"]).upto(count)
    if kind in ("zeros", "ones"):
        return [int(kind == "ones")] * count
    if kind == "pattern":
        cycle = [int(bit) for bit in source["bits"]]
    else:
        cycle = np.unpackbits(np.frombuffer(base64.b64decode(source["base64"]), np.uint8))[: source["bitCount"]].tolist()
    return (cycle * (count // len(cycle) + 1))[:count]


# ---- maps ------------------------------------------------------------------------------------------------------------
BITS = {"bpsk": 1, "pi2-bpsk": 1, "qpsk": 2, "16qam": 4, "64qam": 6, "256qam": 8, "1024qam": 10, "4096qam": 12}


def point(constellation, bit_map, bits, index):
    if constellation == "pi2-bpsk":
        return (1j ** (index % 2)) * (1 - 2 * bits[0]) * (1 + 1j) / math.sqrt(2)
    if constellation == "bpsk":
        return complex(2 * bits[0] - 1) if bit_map == "ieee80211" else (1 - 2 * bits[0]) * (1 + 1j) / math.sqrt(2)
    count = len(bits)
    norm = math.sqrt(2 * (2**count - 1) / 3)
    if bit_map == "ieee80211":
        half = count // 2

        def gray(word):
            place, running = 0, 0
            for bit in word:
                running ^= bit
                place = 2 * place + running
            return 2 * place - (2 ** len(word) - 1)

        return complex(gray(bits[:half]), gray(bits[half:])) / norm

    def nested(word):
        if len(word) == 1:
            return 1 - 2 * word[0]
        inner = nested(word[1:])
        outer = 2 ** (len(word) - 1)
        return (1 - 2 * word[0]) * (outer + inner if bit_map == "en300744" else outer - inner)

    return complex(nested(bits[0::2]), nested(bits[1::2])) / norm


# ---- sequences -------------------------------------------------------------------------------------------------------
CACHE = {}


def cached_bits(key, make, count):
    """Bits from the beginning, grown by doubling."""
    bits = CACHE.get(key, [])
    if len(bits) < count:
        bits = make(max(2 * count, 1024))
        CACHE[key] = bits
    return bits


def turn(part, whole):
    """e^{j2π part/whole} of whole numbers, to long double and back."""
    angle = 2 * PI * LONG(part % whole) / LONG(whole)
    return complex(float(np.cos(angle)), float(np.sin(angle)))


def sequence_value(sequence, index):
    kind = sequence["kind"]
    key = json.dumps(sequence)
    if kind == "constant":
        return 1
    if kind == "alternating":
        return (-1) ** index
    if kind == "pn":
        return 1 - 2 * cached_bits(key, lambda count: source_bits(sequence, count), index + 1)[index]
    if kind == "gold":
        bits = cached_bits(key, Gold(sequence["cInit"]).upto, 2 * index + 2)
        if sequence["points"] == "bpsk":
            return 1 - 2 * bits[index]
        return complex(1 - 2 * bits[2 * index], 1 - 2 * bits[2 * index + 1]) / math.sqrt(2)
    if kind == "zadoffChu":
        length = sequence["length"]
        m = (index + sequence["shift"]) % length
        return turn(-sequence["root"] * m * (m + length % 2), 2 * length)
    if kind == "newman":
        return turn(index * index, 2 * sequence["count"])
    if kind == "schroeder":
        return turn(-index * (index + 1), 2 * sequence["count"])
    return complex(*sequence["points"][index % len(sequence["points"])])


# ---- the document ----------------------------------------------------------------------------------------------------
def cells_of(content):
    rows = []
    for runs in content["grid"]["rows"]:
        row = []
        for length, ink in zip(runs[0::2], runs[1::2]):
            row += [ink] * length
        rows.append(row)
    return [rows[number] for number in content["grid"]["rowOfSymbol"]]


def values_of(content):
    """values[r][l][p], and the positions of symbols."""
    size, count = content["fftSize"], content["symbolCount"]
    half = size // 2
    cells = cells_of(content)
    prefixes = [content["prefixSamples"][l % len(content["prefixSamples"])] for l in range(count)]
    frame = sum(prefixes) + count * size
    repeats = content["timing"]["repeats"]
    values = np.zeros((repeats, count, size), complex)
    streams = {stream["streamId"]: dict(stream, taken=0) for stream in content["streams"]}

    def stream_bits(stream, first, bits):
        key = stream["streamId"] + json.dumps(stream["source"])
        return cached_bits(key, lambda upto: source_bits(stream["source"], upto), first + bits)[first : first + bits]

    for r in range(repeats):
        for stream in streams.values():
            if stream["acrossRepeats"] == "restart":
                stream["taken"] = 0
        counted = [0] * len(content["tray"])
        start = r * (frame + content["timing"]["gapSamples"])
        for l in range(count):
            in_symbol = [0] * len(content["tray"])
            start += prefixes[l]
            for p, number in enumerate(cells[l]):
                ink = content["tray"][number]
                amplitude = 10 ** (ink["powerDb"] / 20)
                value = ink["value"]
                if ink["role"] == "data":
                    stream = streams[value["streamId"]]
                    bits = BITS[value["constellation"]]
                    if stream["fill"] == "running":
                        first, index = stream["taken"], counted[number]
                        stream["taken"] += bits
                    else:
                        counted_repeat = r if stream["acrossRepeats"] == "continue" else 0
                        first, index = 12 * ((counted_repeat * count + l) * size + p), p
                    values[r, l, p] = amplitude * point(value["constellation"], value["bitMap"], stream_bits(stream, first, bits), index)
                elif ink["role"] in ("pilot", "tone"):
                    product = complex(amplitude)
                    for factor in value["factors"]:
                        counter = {"cell": counted[number], "symbolCell": in_symbol[number], "subcarrier": p, "symbol": l}[factor["counter"]]
                        product *= sequence_value(factor["sequence"], counter + factor["start"])
                    if ink["role"] == "tone":
                        degrees = Fraction(value["phaseDeg"])
                        product *= turn(degrees.numerator, 360 * degrees.denominator)
                        if value["continuous"]:
                            product *= turn((p - half) * start, size)
                    values[r, l, p] = product
                counted[number] += 1
                in_symbol[number] += 1
            start += size
    return values, prefixes, frame


def offset_turns(content, samples):
    """The offset's turns at each sample number, exactly reduced, as long doubles."""
    num, den = content["subcarrierSpacingHz"]
    step = Fraction(content["frequencyOffsetHz"]) * Fraction(den, num) / (content["fftSize"] * content["oversampling"])
    whole = step.denominator
    return np.array([LONG((step.numerator * int(n)) % whole) / LONG(whole) for n in samples])


def check(content, found):
    size, m = content["fftSize"], content["oversampling"]
    half, big = size // 2, size * m
    values, prefixes, frame = values_of(content)
    ramp_length = content["overlapSamples"] * m
    timing = content["timing"]
    burst = timing["mode"] == "burst"
    total = timing["repeats"] * (frame + timing["gapSamples"]) * m + timing["padSamples"] + (ramp_length if burst else 0)
    assert total == len(found), (total, len(found))
    i = np.arange(ramp_length)
    ramp = 0.5 * (1 - np.cos(np.pi * (i + 0.5) / ramp_length)) if ramp_length else np.zeros(0)
    wave = np.zeros(total, complex)
    pieces = []  # (first sample, repeat, symbol, prefix) of every symbol
    for r in range(timing["repeats"]):
        start = r * (frame + timing["gapSamples"]) * m
        for l, prefix in enumerate(prefixes):
            spectrum = np.zeros(big, complex)
            spectrum[(np.arange(size) - half) % big] = values[r, l]
            useful = np.fft.ifft(spectrum) * big / math.sqrt(size)
            head = prefix * m
            symbol = np.concatenate((useful[big - head :], useful, useful[:ramp_length]))
            symbol[:ramp_length] *= ramp
            symbol[len(symbol) - ramp_length :] *= ramp[::-1]
            np.add.at(wave, (start + np.arange(len(symbol))) % total, symbol)
            pieces.append((start, r, l, head))
            start += head + big
    wave *= np.exp(2j * np.pi * offset_turns(content, range(total)).astype(float)) if content["frequencyOffsetHz"] else 1

    # 256 samples by long-double sums straight from the cells
    chosen = np.unique(np.random.default_rng(1).integers(0, total, 256))
    error = energy = LONG(0)
    turns = offset_turns(content, chosen)
    k = np.arange(size) - half
    for position, offset in zip(chosen, turns):
        re = im = LONG(0)
        for start, r, l, head in pieces:
            for wrapped in (position, position + total):
                place = wrapped - start
                if not 0 <= place < head + big + ramp_length:
                    continue
                n = place - head
                angle = 2 * PI * ((k * n) % big).astype(LONG) / LONG(big)
                a, b = values[r, l].real.astype(LONG), values[r, l].imag.astype(LONG)
                c, s = np.cos(angle), np.sin(angle)
                weight = 1 / np.sqrt(LONG(size))
                if place < ramp_length:
                    weight *= (1 - np.cos(PI * (place + LONG(0.5)) / ramp_length)) / 2
                if n >= big:
                    weight *= (1 + np.cos(PI * (n - big + LONG(0.5)) / ramp_length)) / 2
                re += weight * np.sum(a * c - b * s)
                im += weight * np.sum(a * s + b * c)
        c, s = np.cos(2 * PI * offset), np.sin(2 * PI * offset)
        re, im = re * c - im * s, re * s + im * c
        error += (LONG(found[position].real) - re) ** 2 + (LONG(found[position].imag) - im) ** 2
        energy += re**2 + im**2

    def decibels(part, whole):
        return -400.0 if part == 0 else float(10 * np.log10(part / whole)) if whole > 0 else 0.0

    whole_error = np.sum(np.abs(wave - found) ** 2)
    return {
        "samples": total,
        "wholeDb": decibels(whole_error, np.sum(np.abs(wave) ** 2)),
        "directDb": decibels(error, energy),
    }


def main():
    directory = Path(sys.argv[1])
    results = []
    for number in range(len(list(directory.glob("*.json")))):
        CACHE.clear()
        content = json.loads((directory / f"{number}.json").read_text())
        results.append(check(content, np.fromfile(directory / f"{number}.f64", "<f8").view(complex)))
    print(json.dumps(results))


main()
