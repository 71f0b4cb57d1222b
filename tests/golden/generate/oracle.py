"""An oracle for lib/synth: the waveform document read a second time, in NumPy with long doubles.

    oracle.py draw  documents.json           writes the documents of the comparison, from a fixed seed
    oracle.py tell  documents.json           prints what their files must be: JSON of digests and counts
    oracle.py judge documents.json folder    the same, with how far the samples in folder/<number>.f64 are off, in dB

Written from the conventions of the document and of the signal alone. It shares no code with the product, and does
most steps in another way: transforms by recursion over the factors of N with long-double twiddles, ramps and sums on
whole arrays, levels from the whole file at once. The documents are drawn beside it (drawn.py), so that what they hold
was not chosen by the program that is judged.
"""

import base64
import hashlib
import json
import sys
from fractions import Fraction
from pathlib import Path

import numpy as np

sys.dont_write_bytecode = True
from drawn import COUNT, PLAIN, draw_one  # noqa: E402

REAL = np.longdouble
COMPLEX = np.clongdouble
TAU = 2 * REAL("3.14159265358979323846264338327950288419717")


# ---- angles ----------------------------------------------------------------------------------------------------------
def turns(parts, whole):
    """e^{j 2 pi part/whole} for whole numbers, each reduced to one turn before it is made a fraction."""
    reduced = [int(part) % whole for part in np.atleast_1d(np.asarray(parts, object))]
    angle = TAU * np.array([REAL(r) / REAL(whole) for r in reduced], REAL)
    return np.cos(angle) + 1j * np.sin(angle)


# ---- transforms ------------------------------------------------------------------------------------------------------
ROOTS = {}


def roots(size):
    if size not in ROOTS:
        angle = TAU * np.arange(size, dtype=REAL) / REAL(size)
        ROOTS[size] = np.cos(angle) + 1j * np.sin(angle)
    return ROOTS[size]


def upward(values):
    """sum over k of values[..., k] e^{+j 2 pi k n / size}: decimation in time over the factors 2, 3 and 5."""
    size = values.shape[-1]
    if size == 1:
        return values
    factor = next((prime for prime in (5, 3, 2) if size % prime == 0), size)
    part = size // factor
    below = [upward(values[..., rest::factor]) for rest in range(factor)]
    twiddle = roots(size)
    n = np.arange(size)
    total = np.zeros(values.shape, COMPLEX)
    for rest, some in enumerate(below):
        total += twiddle[(rest * n) % size] * some[..., n % part]
    return total


def downward(values):
    return np.conj(upward(np.conj(values)))


# ---- bits ------------------------------------------------------------------------------------------------------------
def recurrence(taps, first, count):
    """b(t) = XOR of b(t - tap). Squaring the polynomial doubles every tap, so that long stretches come at once."""
    bits = np.zeros(max(count, len(first)), np.uint8)
    bits[: len(first)] = first
    done = len(first)
    while done < count:
        doubling = 1
        while taps[-1] * doubling * 2 <= done:
            doubling *= 2
        span = min(taps[0] * doubling, count - done)
        stretch = np.zeros(span, np.uint8)
        for tap in taps:
            begin = done - tap * doubling
            stretch ^= bits[begin : begin + span]
        bits[done : done + span] = stretch
        done += span
    return bits[:count]


def register_bits(register, count):
    first = [(register["seed"] >> i) & 1 for i in range(register["stages"])]
    return recurrence(register["taps"], first, count) ^ np.uint8(register["inverted"])


def gold_bits(c_init, count):
    """TS 38.211 5.2.1: x1(n+31) = x1(n+3) + x1(n), x2(n+31) = x2(n+3) + x2(n+2) + x2(n+1) + x2(n), 1600 left out."""
    one = recurrence([28, 31], [1] + [0] * 30, count + 1600)
    two = recurrence([28, 29, 30, 31], [(c_init >> i) & 1 for i in range(31)], count + 1600)
    return (one ^ two)[1600:]


def payload(source, count):
    kind = source["kind"]
    if kind == "pn":
        return register_bits(source, count)
    if kind == "gold":
        return gold_bits(source["cInit"], count)
    if kind == "zeros" or kind == "ones":
        return np.full(count, kind == "ones", np.uint8)
    if kind == "pattern":
        cycle = np.array([int(bit) for bit in source["bits"]], np.uint8)
    else:
        cycle = np.unpackbits(np.frombuffer(base64.b64decode(source["base64"]), np.uint8))[: source["bitCount"]]
    return np.resize(cycle, count)


# ---- points ----------------------------------------------------------------------------------------------------------
WIDTH = {"bpsk": 1, "pi2-bpsk": 1, "qpsk": 2, "16qam": 4, "64qam": 6, "256qam": 8, "1024qam": 10, "4096qam": 12}


def level_3gpp(bits):
    """(1-2b)[2^m - (1-2b')[2^(m-1) - ...]]: the innermost level is 1, a magnitude bit of 0 means further in."""
    value = 0
    for place, bit in enumerate(reversed(bits)):
        value = (1 - 2 * bit) * (2**place - value if place else 1)
    return value


def level_dvb(bits):
    """As above with magnitude bits the other way round: 0 means further out."""
    value = 0
    for place, bit in enumerate(reversed(bits)):
        value = (1 - 2 * bit) * (2**place + value if place else 1)
    return value


def level_80211(bits):
    """A reflected Gray code from the lowest level up: 000 is -7, 001 is -5, 011 is -3 ..."""
    binary = 0
    for bit in bits:
        binary = 2 * binary + (bit ^ (binary & 1))
    return 2 * binary - (2 ** len(bits) - 1)


def points_of(name, bit_map):
    """Points by word, the first bit the most significant."""
    width = WIDTH[name]
    words = [[(word >> (width - 1 - i)) & 1 for i in range(width)] for word in range(2**width)]
    root = np.sqrt(REAL(2))
    if width == 1:
        signs = np.array([1 - 2 * word[0] for word in words], REAL)
        return -signs + 0j if bit_map == "ieee80211" else signs * (1 + 1j) / root
    if bit_map == "ieee80211":
        pairs = [(level_80211(word[: width // 2]), level_80211(word[width // 2 :])) for word in words]
    else:
        level = level_dvb if bit_map == "en300744" else level_3gpp
        pairs = [(level(word[0::2]), level(word[1::2])) for word in words]
    raw = np.array([REAL(i) + 1j * REAL(q) for i, q in pairs], COMPLEX)
    return raw / np.sqrt(np.mean(np.abs(raw) ** 2))


# ---- sequences -------------------------------------------------------------------------------------------------------
def sequence_values(sequence, indices):
    kind = sequence["kind"]
    if kind == "constant":
        return np.ones(len(indices), COMPLEX)
    if kind == "alternating":
        return np.array([1 - 2 * (i % 2) for i in indices], COMPLEX)
    last = max(indices, default=0)
    if kind == "pn":
        return 1 - 2 * register_bits(sequence, last + 1)[indices].astype(COMPLEX)
    if kind == "gold":
        bits = 1 - 2 * gold_bits(sequence["cInit"], 2 * last + 2).astype(REAL)
        at = np.array(indices)
        if sequence["points"] == "bpsk":
            return bits[at] + 0j
        return (bits[2 * at] + 1j * bits[2 * at + 1]) / np.sqrt(REAL(2))
    if kind == "zadoffChu":
        length, root, shift = sequence["length"], sequence["root"], sequence["shift"]
        m = [(i + shift) % length for i in indices]
        return turns([-root * n * (n + length % 2) for n in m], 2 * length)
    if kind == "newman":
        return turns([i * i for i in indices], 2 * sequence["count"])
    if kind == "schroeder":
        return turns([-i * (i + 1) for i in indices], 2 * sequence["count"])
    table = np.array([REAL(re) + 1j * REAL(im) for re, im in sequence["points"]], COMPLEX)
    return table[np.array(indices) % len(table)]


# ---- a document's cells ----------------------------------------------------------------------------------------------
def decibels(db):
    return REAL(10) ** (REAL(db) / 20)


class Document:
    def __init__(self, content):
        self.content = content
        self.size, self.symbols = content["fftSize"], content["symbolCount"]
        self.half = self.size // 2
        self.repeats = content["timing"]["repeats"]
        written = content["prefixSamples"]
        self.prefixes = [written[l % len(written)] for l in range(self.symbols)]
        self.frame = sum(self.prefixes) + self.symbols * self.size
        self.stride = self.frame + content["timing"]["gapSamples"]
        rows = []
        for runs in content["grid"]["rows"]:
            rows.append(np.repeat(runs[1::2], runs[0::2]))
        self.inks = np.array([rows[row] for row in content["grid"]["rowOfSymbol"]])
        self.tray = content["tray"]

    def symbol_starts(self):
        """First prefix sample of each symbol in its repeat, at the base rate."""
        starts, at = [], 0
        for prefix in self.prefixes:
            starts.append(at)
            at += prefix + self.size
        return starts

    def streams(self):
        """For every stream: cells of one repeat as (symbol, position, width), in order of filling."""
        order = {stream["streamId"]: [] for stream in self.content["streams"]}
        for l in range(self.symbols):
            for p in range(self.size):
                ink = self.tray[self.inks[l, p]]
                if ink["role"] == "data":
                    order[ink["value"]["streamId"]].append((l, p, WIDTH[ink["value"]["constellation"]]))
        return order

    def first_bits(self):
        """Number of the first source bit of every data cell: [repeat][symbol][position]."""
        found = np.full((self.repeats, self.symbols, self.size), -1, object)
        order = self.streams()
        for stream in self.content["streams"]:
            taken = 0
            goes_on = stream["acrossRepeats"] == "continue"
            for r in range(self.repeats):
                if not goes_on:
                    taken = 0
                for l, p, width in order[stream["streamId"]]:
                    if stream["fill"] == "running":
                        found[r, l, p] = taken
                        taken += width
                    else:
                        found[r, l, p] = 12 * (((r if goes_on else 0) * self.symbols + l) * self.size + p)
        return found

    def meant(self):
        """a(k, l) of every repeat as painted: [repeat, symbol, position k + floor(N/2)]."""
        values = np.zeros((self.repeats, self.symbols, self.size), COMPLEX)
        first = self.first_bits()
        sources = {stream["streamId"]: stream for stream in self.content["streams"]}
        starts = self.symbol_starts()
        for number, ink in enumerate(self.tray):
            places = [tuple(place) for place in np.argwhere(self.inks == number)]
            if not places or ink["role"] in ("null", "reserved"):
                continue
            at_symbol, at_position = np.array(places).T
            amplitude = decibels(ink["powerDb"])
            value = ink["value"]
            if ink["role"] == "data":
                stream = sources[value["streamId"]]
                width = WIDTH[value["constellation"]]
                table = points_of(value["constellation"], value["bitMap"])
                last = max(first[r, l, p] for r in range(self.repeats) for l, p in places) + width
                bits = payload(stream["source"], last)
                for r in range(self.repeats):
                    for count, (l, p) in enumerate(places):
                        word = 0
                        for bit in bits[first[r, l, p] : first[r, l, p] + width]:
                            word = 2 * word + int(bit)
                        turn = 1
                        if value["constellation"] == "pi2-bpsk":
                            index = count if stream["fill"] == "running" else p
                            turn = 1j if index % 2 else 1
                        values[r, l, p] = amplitude * turn * table[word]
                continue
            in_symbol, seen = [], {}
            for l, _ in places:
                in_symbol.append(seen.get(l, 0))
                seen[l] = in_symbol[-1] + 1
            counters = {
                "cell": list(range(len(places))),
                "symbolCell": in_symbol,
                "subcarrier": [int(p) for p in at_position],
                "symbol": [int(l) for l in at_symbol],
            }
            product = np.full(len(places), amplitude, COMPLEX)
            for factor in value["factors"]:
                indices = [i + factor["start"] for i in counters[factor["counter"]]]
                product = product * sequence_values(factor["sequence"], indices)
            if ink["role"] == "tone":
                degrees = Fraction(value["phaseDeg"])
                product = product * turns(degrees.numerator, 360 * degrees.denominator)[0]
            for r in range(self.repeats):
                once = product
                if ink["role"] == "tone" and value["continuous"]:
                    useful = [r * self.stride + starts[l] + self.prefixes[l] for l, _ in places]
                    parts = [(int(p) - self.half) * s for (_, p), s in zip(places, useful)]
                    once = product * turns(parts, self.size)
                values[r, at_symbol, at_position] = once
        return values

    # ---- samples -----------------------------------------------------------------------------------------------------
    def useful_parts(self, values, over):
        """The useful parts at `over` times the base rate: [repeat, symbol, over N], mean power sum |a|^2 / N."""
        bins = np.zeros(values.shape[:2] + (self.size * over,), COMPLEX)
        bins[..., (np.arange(self.size) - self.half) % (self.size * over)] = values
        return upward(bins) / np.sqrt(REAL(self.size))

    def file(self, values, over):
        """The whole file at `over` times the base rate, before the frequency offset; and what the active spans hold."""
        content, timing = self.content, self.content["timing"]
        pad = timing["padSamples"] * over // content["oversampling"]
        ramp_samples = content["overlapSamples"] * over
        is_burst = timing["mode"] == "burst"
        total = self.repeats * self.stride * over + pad + (ramp_samples if is_burst else 0)
        wave = np.zeros(total, COMPLEX)
        i = np.arange(ramp_samples, dtype=REAL)
        rising = (1 - np.cos(TAU / 2 * (i + REAL(0.5)) / max(ramp_samples, 1))) / 2
        useful = self.useful_parts(values, over)
        for r in range(self.repeats):
            for l, start in enumerate(self.symbol_starts()):
                body = useful[r, l]
                head = self.prefixes[l] * over
                extended = np.concatenate((body[len(body) - head :], body, body[:ramp_samples]))
                if ramp_samples:
                    extended[:ramp_samples] *= rising
                    extended[-ramp_samples:] *= rising[::-1]
                begin = (r * self.stride + start) * over
                np.add.at(wave, (begin + np.arange(len(extended))) % total, extended)
        return wave

    def turned(self, wave):
        """Times e^{j 2 pi f0 n / fs}, the turns as whole numbers modulo one turn."""
        content = self.content
        numerator, denominator = content["subcarrierSpacingHz"]
        clock = Fraction(self.size * content["oversampling"] * numerator, denominator)
        step = Fraction(content["frequencyOffsetHz"]) / clock
        if step == 0:
            return wave
        return wave * turns([step.numerator * n for n in range(len(wave))], step.denominator)

    def interpolation(self):
        over = self.content["oversampling"]
        return over * -(-4 // over)

    # ---- peak reduction ----------------------------------------------------------------------------------------------
    def active_mean(self, values, over):
        """Mean power of a rendering over symbols that are not silent: prefix, useful part, and the suffix behind the last."""
        wave = self.file(values, over)
        ramp_samples = self.content["overlapSamples"] * over
        energy, samples = REAL(0), 0
        is_burst = self.content["timing"]["mode"] == "burst"
        for r in range(self.repeats):
            is_loud = False
            for l, start in enumerate(self.symbol_starts()):
                begin = (r * self.stride + start) * over
                end = begin + (self.prefixes[l] + self.size) * over
                is_loud = bool(np.any(values[r, l] != 0))
                if is_loud:
                    energy += np.sum(np.abs(wave[begin:end]) ** 2)
                    samples += end - begin
            # behind the frame: the suffix, as far as gap, pad and tail have room for it
            end = (r * self.stride + self.frame) * over
            room = len(wave) - end if r == self.repeats - 1 else self.content["timing"]["gapSamples"] * over
            extra = min(ramp_samples, room)
            if is_loud:
                energy += np.sum(np.abs(wave[end : end + extra]) ** 2)
                samples += extra
        return energy / samples if samples else REAL(0)

    def sent(self):
        """The values after peak reduction, symbol by symbol on the interpolated useful part.

        The limit stands targetPaprDb over the frame's mean power before. Clip and filter: the envelope is limited, and
        cells of data and reserved inks take what the limited symbol has there. Tone reservation: reserved cells lose
        their share of what stands above the limit, times the factor that makes the squares of the rest least where it
        stands; the best of all passes stays.
        """
        values = self.meant()
        reduction = self.content["peakReduction"]
        if reduction["kind"] == "none":
            return values
        over = self.interpolation()
        limit = decibels(reduction["targetPaprDb"]) * np.sqrt(self.active_mean(values, over))
        is_clip = reduction["kind"] == "clipAndFilter"
        roles = ("data", "reserved") if is_clip else ("reserved",)
        may_change = np.array([ink["role"] in roles for ink in self.tray])[self.inks]
        bins = (np.arange(self.size) - self.half) % (self.size * over)
        root = np.sqrt(REAL(self.size))

        def wave_of(cells):
            spectrum = np.zeros(self.size * over, COMPLEX)
            spectrum[bins] = cells
            return upward(spectrum) / root

        def cells_of(wave):
            return downward(wave)[bins] * root / (self.size * over)

        for r in range(self.repeats):
            for l in range(self.symbols):
                free = may_change[l]
                cells = values[r, l].copy()
                best, lowest = cells, None
                for count in range(reduction["iterations"] + 1 if free.any() else 0):
                    wave = wave_of(cells)
                    peak = np.max(np.abs(wave))
                    if is_clip or lowest is None or peak < lowest:
                        best, lowest = cells, peak
                    if count == reduction["iterations"] or peak <= limit:
                        break
                    magnitude = np.abs(wave)
                    above = magnitude > limit
                    kept = np.where(above, wave * (limit / np.where(above, magnitude, 1)), wave)
                    if is_clip:
                        cells = np.where(free, cells_of(kept), cells)
                        continue
                    excess = wave - kept
                    share = np.where(free, cells_of(excess), 0)
                    change = wave_of(share)[above]
                    power = np.sum(np.abs(change) ** 2)
                    if power == 0:
                        break
                    cells = cells - np.sum((np.conj(change) * excess[above]).real) / power * share
                values[r, l] = best
        return values


# ---- words -----------------------------------------------------------------------------------------------------------
def scale_of(document, values, wave, full_scale):
    level = document.content["level"]
    reference = level["reference"]
    if reference == "interpolatedPeak":
        peak = np.max(np.abs(document.file(values, document.interpolation())))
    elif reference == "samplePeak":
        peak = np.max(np.abs(wave))
    elif reference == "componentPeak":
        peak = max(np.max(np.abs(wave.real)), np.max(np.abs(wave.imag)))
    else:
        peak = np.sqrt(np.mean(np.abs(wave) ** 2))
    return full_scale / decibels(level["headroomDb"]) / peak if peak > 0 else REAL(0)


def words_of(document, values, wave, bench):
    """The vector's words as the file has them, [samples, 2], in an array of the file's own type."""
    is_float = bench["word"] == "float32"
    full_scale = REAL(1 if is_float else 2 ** (bench["bits"] - 1) - 1)
    scaled = scale_of(document, values, wave, full_scale) * np.stack((wave.real, wave.imag), 1)
    if bench["negateQ"]:
        scaled[:, 1] = -scaled[:, 1]
    order = "<" if bench["byteOrder"] == "little" else ">"
    if is_float:
        words = scaled.astype(np.float64).astype(np.float32)
        words[words == 0] = 0  # one zero only
        words = words.astype(order + "f4")
    else:
        whole = np.clip(np.rint(scaled), -full_scale - 1, full_scale).astype(np.int64)
        if bench["numberFormat"] == "offsetBinary":
            whole += 2 ** (bench["bits"] - 1)
        if bench["align"] == "left":
            whole <<= 16 - bench["bits"]
        width = 1 if bench["word"] == "int8" else 2
        words = (whole % 256**width).astype(f"{order}u{width}")
    return words[:, ::-1] if bench["swapIq"] else words


def told(entry):
    """What the files of a document must be."""
    document = Document(entry["content"])
    values = document.sent()
    wave = document.turned(document.file(values, document.content["oversampling"]))
    plain = dict(PLAIN, word="int16", bits=16)
    int16 = words_of(document, values, wave, plain)
    own = words_of(document, values, wave, entry["bench"])
    columns = [own] if entry["bench"]["layout"] == "interleaved" else [own[:, 0], own[:, 1]]
    if entry["bench"]["word"] == "float32":
        # single precision keeps what doubles round where a sample is nothing; in steps of 2^-20 both say the same
        columns = [np.rint(column.astype(float) * 2**20).astype("<i4") for column in columns]
    digest = lambda words: hashlib.sha256(np.ascontiguousarray(words).tobytes()).hexdigest()
    return wave, {"samples": len(wave), "int16": digest(int16), "own": [digest(column) for column in columns]}


def distance_db(found, wave):
    power = np.sum(np.abs(wave) ** 2)
    error = np.sum(np.abs(found.astype(COMPLEX) - wave) ** 2)
    return -999.0 if error == 0 else float(10 * np.log10(error / power))


def main():
    what, path = sys.argv[1], Path(sys.argv[2])
    if what == "draw":
        lines = [json.dumps(draw_one(number), separators=(",", ":")) for number in range(COUNT)]
        path.write_text("[\n" + ",\n".join(lines) + "\n]\n")
        return
    results = []
    for number, entry in enumerate(json.loads(path.read_text())):
        wave, result = told(entry)
        if what == "judge":
            found = np.fromfile(Path(sys.argv[3]) / f"{number}.f64", "<f8").view(complex)
            result["distanceDb"] = distance_db(found, wave) if len(found) == len(wave) else 0.0
        results.append(result)
    print("[\n" + ",\n".join(json.dumps(result) for result in results) + "\n]")


main()
