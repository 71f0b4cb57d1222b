"""The documents that the oracle tells of: drawn from a fixed seed, so that each feature is met and the rest is chance.

What a document may hold was read in its conventions alone, as the oracle's rendering was.
"""

import base64
import math
import random

import numpy as np

SEED = 7041776
COUNT = 80
NAMES = ["bpsk", "pi2-bpsk", "qpsk", "16qam", "64qam", "256qam", "1024qam", "4096qam"]
PLAIN = {
    "sampleClockHz": {"least": 1e-3, "most": 1e13, "step": None},
    "word": "int16",
    "bits": 16,
    "align": "right",
    "numberFormat": "twosComplement",
    "byteOrder": "little",
    "layout": "interleaved",
    "container": "raw",
    "swapIq": False,
    "negateQ": False,
    "granularitySamples": 1,
    "leastSamples": 1,
    "mostSamples": 2**40,
    "leastHeadroomDb": 0,
    "levelMeans": "unknown",
    "markers": {"count": 0, "packing": "none", "leastSamples": 1, "stepSamples": 1},
    "modes": ["loop", "burst"],
    "fileName": {"most": 40, "extension": "bin"},
}
PAIRS = (
    [(name, "ts38211") for name in NAMES]
    + [(name, "ieee80211") for name in NAMES if name != "pi2-bpsk"]
    + [(name, "en300744") for name in ("qpsk", "16qam", "64qam")]
)
SIZES = [16, 18, 20, 24, 25, 27, 30, 32, 36, 45, 48, 60, 64, 72, 75, 80, 81, 90, 96, 100, 125, 128, 135, 144, 160, 192, 225, 240, 243, 256, 300, 384, 512, 625, 1024, 1200, 2048, 4050, 4096, 16384]
SEQUENCES = ["constant", "alternating", "pn", "goldBpsk", "goldQpsk", "zadoffChu", "newman", "schroeder", "listed"]
SOURCES = ["pn", "gold", "zeros", "ones", "pattern", "uploaded"]
COUNTERS = ["cell", "symbolCell", "subcarrier", "symbol"]


def a_register(rng):
    stages = rng.randint(2, 31)
    taps = sorted(rng.sample(range(1, stages), min(stages - 1, rng.randint(0, 3)))) + [stages]
    return {"kind": "pn", "stages": stages, "taps": taps, "seed": rng.randint(1, 2**stages - 1), "inverted": rng.random() < 0.5}


def a_sequence(rng, kind):
    if kind == "pn":
        return a_register(rng)
    if kind in ("goldBpsk", "goldQpsk"):
        return {"kind": "gold", "cInit": rng.randint(0, 2**31 - 1), "points": kind[4:].lower()}
    if kind == "zadoffChu":
        length = rng.choice([2, 7, 12, 36, 63, 139, 839, 1024, 65536])
        root = next(u for u in iter(lambda: rng.randint(1, length - 1), None) if math.gcd(u, length) == 1)
        return {"kind": kind, "length": length, "root": root, "shift": rng.randint(0, length - 1)}
    if kind in ("newman", "schroeder"):
        return {"kind": kind, "count": rng.choice([1, 5, 64, 1000, 2**20])}
    if kind == "listed":
        points = [[rng.randint(-160, 160) / 64, rng.randint(-160, 160) / 64] for _ in range(rng.randint(1, 6))]
        return {"kind": kind, "points": points}
    return {"kind": kind}


def a_source(rng, kind):
    if kind == "pn":
        return a_register(rng)
    if kind == "gold":
        return {"kind": "gold", "cInit": rng.randint(0, 2**31 - 1)}
    if kind == "pattern":
        return {"kind": kind, "bits": "".join(rng.choice("01") for _ in range(rng.randint(1, 90)))}
    if kind == "uploaded":
        data = bytearray(rng.randrange(256) for _ in range(rng.randint(1, 60)))
        unused = rng.randint(0, 7)
        data[-1] &= 256 - 2**unused
        text = base64.b64encode(bytes(data)).decode()
        return {"kind": kind, "name": "bits", "bitCount": 8 * len(data) - unused, "base64": text}
    return {"kind": kind}


def a_factor(rng, kind, counters):
    return {"sequence": a_sequence(rng, kind), "counter": rng.choice(counters), "start": rng.choice([0, 0, 1, 17, 900])}


def draw_one(number):
    """Document `number`: what is to be met at least once goes round with the number, the rest is chance."""
    rng = random.Random(SEED + number)
    size = SIZES[number % len(SIZES)]
    most = max(1, 4096 // size)
    symbols = rng.randint(1, min(most, 12))
    stream_count = 1 + number % 3
    streams = [
        {
            "streamId": f"s{i}",
            "name": f"Stream {i}",
            "source": a_source(rng, SOURCES[(number + i) % len(SOURCES)]),
            "fill": ("running", "anchored")[(number + i) % 2],
            "acrossRepeats": rng.choice(["restart", "continue"]),
        }
        for i in range(stream_count)
    ]
    power = lambda: rng.choice([0, 0, 3, -2.5, -20.25, 6])

    def data(pair, stream):
        return ("data", {"constellation": pair[0], "bitMap": pair[1], "streamId": f"s{stream}"})

    pilot_factors = [a_factor(rng, SEQUENCES[(number + i) % len(SEQUENCES)], [COUNTERS[(number + i) % 4]]) for i in range(1 + number % 3)]
    tone_factors = [a_factor(rng, rng.choice(SEQUENCES), ["symbolCell", "subcarrier"]) for _ in range(number % 4)]
    inks = [
        data(PAIRS[number % len(PAIRS)], 0),
        data(rng.choice(PAIRS), number % stream_count),
        ("pilot", {"factors": pilot_factors}),
        ("tone", {"factors": tone_factors, "phaseDeg": rng.choice([0, 90, -45, 12.5, 359.9]), "continuous": number % 2 == 0}),
        ("reserved", None),
        data(rng.choice(PAIRS), stream_count - 1),
    ]
    tray = [{"inkId": "k0", "name": "Null", "role": "null", "powerDb": 0, "value": None}]
    for place, (role, value) in enumerate(inks, 1):
        tray.append({"inkId": f"k{place}", "name": f"{role} {place}", "role": role, "powerDb": power(), "value": value})

    cells = np.zeros((symbols, size), int)
    low, high = sorted(rng.sample(range(size + 1), 2)) if number % 3 else (0, size)
    cells[:, low:high] = 1
    for ink in (2, 6, 5, 3, 4):
        first, count = rng.randrange(symbols), rng.randint(1, symbols)
        begin, width, step = rng.randrange(size), rng.randint(1, size), rng.randint(1, 7)
        cells[first : first + count, begin : begin + width : step] = ink
    rows, row_of = [], []
    for line in cells.tolist():
        if line not in rows:
            rows.append(line)
        row_of.append(rows.index(line))
    runs = []
    for line in rows:
        row = []
        for ink in line:
            if row and row[-1] == ink:
                row[-2] += 1
            else:
                row += [1, ink]
        runs.append(row)

    prefixes = [rng.choice([size // 4, size // 8, rng.randint(0, size)]) for _ in range(rng.choice([1, 1, 2, min(3, symbols), symbols]))][:symbols]
    over = [1, 1, 2, 3, 1, 4, 5, 8][number % 8]
    if size * over > 4096:
        over = 1
    spacing = rng.choice([[15000, 1], [312500, 1], [31250, 7], [1000, 3], [1, 1], [375, 8]])
    if size * over * spacing[0] > 4e9 * spacing[1]:
        spacing = [15000, 1]  # what a WAV header can say
    clock = size * over * spacing[0] / spacing[1]
    offset = rng.choice([0, 0, 0.25, -0.125, 0.1234567, -0.4999, 1e-7]) * clock
    offset = float(round(offset, rng.choice([0, 0, 3]))) + 0.0
    while abs(offset) > clock / 2:
        offset = offset / 2
    content = {
        "fftSize": size,
        "subcarrierSpacingHz": spacing,
        "symbolCount": symbols,
        "prefixSamples": prefixes,
        "overlapSamples": rng.choice([0, min(prefixes), rng.randint(0, min(prefixes))]),
        "oversampling": over,
        "frequencyOffsetHz": int(offset) if offset == int(offset) else offset,
        "timing": {
            "mode": ("loop", "burst")[(number // 2) % 2],
            "repeats": rng.choice([1, 1, 2, 3]),
            "gapSamples": rng.choice([0, 0, rng.randint(1, 60)]),
            "padSamples": rng.choice([0, 0, rng.randint(1, 90)]),
        },
        "tray": tray,
        "grid": {"rows": runs, "rowOfSymbol": row_of},
        "streams": streams,
        "peakReduction": {"kind": "none"},
        "level": {
            "reference": ("interpolatedPeak", "samplePeak", "componentPeak", "rms")[number % 4],
            "headroomDb": rng.choice([0, 1, 3.5, 12]),
        },
        "markers": [],
    }
    is_small = size * symbols * content["timing"]["repeats"] <= 900
    if number % 5 == 1 and is_small:
        content["peakReduction"] = {"kind": "clipAndFilter", "targetPaprDb": rng.choice([3, 4.5, 6]), "iterations": rng.randint(1, 4)}
    if number % 5 == 3 and is_small:
        content["peakReduction"] = {"kind": "toneReservation", "targetPaprDb": rng.choice([4, 5.5, 7]), "iterations": rng.randint(1, 5)}
    word = ("int16", "int8", "int16", "float32", "int16")[number % 5]
    bits = {"int8": 8, "float32": 16}.get(word) or rng.choice([8, 10, 12, 14, 16])
    container = ("raw", "raw", "npy", "wav")[(number // 5) % 4]
    if word == "float32" and (number // 5) % 4 == 1:
        container = "csv"
    is_wav = container == "wav"
    offset_binary = word != "float32" and (word == "int8" if is_wav else rng.random() < 0.4)
    bench = dict(
        PLAIN,
        word=word,
        bits=bits,
        align=rng.choice(["left", "right"]) if word == "int16" else "right",
        numberFormat="offsetBinary" if offset_binary else "twosComplement",
        byteOrder="little" if is_wav else rng.choice(["little", "big"]),
        layout="interleaved" if is_wav else rng.choice(["interleaved", "interleaved", "split"]),
        container=container,
        swapIq=rng.random() < 0.3,
        negateQ=rng.random() < 0.3,
    )
    return {"content": content, "bench": bench}
