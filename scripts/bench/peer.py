"""
The peer of the engine's bench: the analysis of one series as a numpy/scipy script would do it, on one
thread. Same files, same steps: WAV reading, calibrator, room noise, the run's own silence, spectral
division, arrival, windows of orders 1 to 9 with their floors, 1/24-octave means, third octaves, THD,
compression, and the posterior of the onset over a table of laws; JSON text at the end.

    python3 scripts/bench/peer.py <folder> [runs]

Prints one object: warm_ms, median over the runs (after three more) within this process.
"""
import json
import os
import sys
import time

for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ[name] = "1"

import numpy as np
from scipy import fft

THIRD_DB = 1 / 3
ORDERS = range(1, 10)


def read(path):
    """Mono PCM of 24 bits, as the bench writes it; float32 re full scale."""
    with open(path, "rb") as file:
        data = file.read()
    rate, at = 0, 12
    while data[at : at + 4] != b"data":
        size = int.from_bytes(data[at + 4 : at + 8], "little")
        if data[at : at + 4] == b"fmt ":
            rate = int.from_bytes(data[at + 12 : at + 16], "little")
        at += 8 + size + size % 2
    size = int.from_bytes(data[at + 4 : at + 8], "little")
    triples = np.frombuffer(data, np.uint8, size // 3 * 3, at + 8).reshape(-1, 3)
    words = np.zeros((len(triples), 4), np.uint8)
    words[:, 1:] = triples
    samples = words.view("<i4")[:, 0].astype(np.float32)
    samples *= np.float32(2.0**-31)
    return samples, rate


def hann(size):
    return 0.5 - 0.5 * np.cos(2 * np.pi / size * np.arange(size))


def power_of(spectrum):
    return spectrum.real**2 + spectrum.imag**2


def grid(start, stop):
    x = np.arange(np.ceil(80 * np.log10(start / 1000)), np.floor(80 * np.log10(stop / 1000)))
    return 1000 * 10 ** (x / 80)


class Analysis:
    """What one set of levels, sizes and laws needs is made once and kept."""

    def __init__(self):
        self.kept = {}

    def once(self, key, make):
        if key not in self.kept:
            self.kept[key] = make()
        return self.kept[key]

    def log_means(self, spectrum, step, edges):
        """Means uniform in lg f by the running integral over ln f."""
        ln = self.once(("ln", len(spectrum)), lambda: np.log(np.maximum(np.arange(len(spectrum)), 0.5)))
        widths = self.once(("widths", len(spectrum)), lambda: 0.5 * np.diff(ln))
        integral = np.empty(len(spectrum))
        integral[0] = 0
        np.cumsum((spectrum[1:] + spectrum[:-1]) * widths, out=integral[1:])
        position = np.log(np.maximum(edges / step, 0.5))
        at = np.interp(position, ln, integral)
        means = np.diff(at) / np.diff(position)
        means[edges[1:] / step > len(spectrum) - 1] = np.nan
        return means

    def noise(self, samples, rate):
        size = fft.next_fast_len(int(0.35 * rate / 2), real=True)
        if len(samples) < size:
            return None
        hop = max(size // 2, (len(samples) - size) // 32)
        blocks = np.lib.stride_tricks.sliding_window_view(samples, size)[::hop]
        window = self.once(("hann", size), lambda: hann(size))
        power = power_of(fft.rfft(blocks * window, axis=1)).mean(axis=0)
        frequencies = np.arange(len(power)) * rate / size
        return power * frequencies * 2 / (rate * 0.375 * size), rate / size

    def run(self, folder):
        series = json.load(open(os.path.join(folder, "series.json")))
        load = lambda name: read(os.path.join(folder, name))
        tone, rate = load(series["calibration"]["file"])
        block = int(0.2 * rate)
        cut = tone[: len(tone) // block * block].reshape(-1, block)
        probe = power_of(fft.rfft(tone[: 2**16] * self.once("hann16", lambda: hann(2**16))))
        hertz = np.argmax(probe) * rate / 2**16
        carrier = hann(block) * np.exp(-2j * np.pi * hertz / rate * np.arange(block))
        parts = np.ascontiguousarray(np.stack((carrier.real, carrier.imag), axis=1), np.float32)
        amplitude = np.median(np.hypot(*(cut @ parts).T)) * 2 / (block / 2)
        scale = series["calibration"]["level_dB"] - 20 * np.log10(amplitude)
        stimulus, _ = load(series["stimulus"]["file"])
        room = self.noise(load(series["ambient"]["file"])[0], rate)
        start, stop = series["stimulus"]["start_Hz"], series["stimulus"]["stop_Hz"]
        constant = series["stimulus"]["length_s"] / np.log(stop / start)
        lead = int(series["stimulus"]["lead_in_s"] * rate)
        size = fft.next_fast_len(len(stimulus), real=True)
        spectrum = fft.rfft(stimulus.astype(np.float64), size)
        step = rate / size
        low, high = int(0.9 * start / step), int(stop / step)
        inverse = np.zeros_like(spectrum)
        power = power_of(spectrum[low:high])
        inverse[low:high] = np.conj(spectrum[low:high]) / np.maximum(power, 1e-3 * np.median(power))
        edges = self.once(("edges", start, stop), lambda: grid(start, stop))
        # The room is the same under every run.
        rooms = [self.log_means(*room, n * edges) for n in ORDERS] if room is not None else []
        levels, runs = [], []
        for run in series["runs"]:
            samples, _ = load(run["file"])
            peak = float(np.abs(samples).max())
            response = fft.irfft(fft.rfft(samples.astype(np.float64), size) * inverse, size)
            arrival = int(np.argmax(np.abs(response)))
            begin = max(0, arrival + lead - int(0.02 * rate))
            silence = self.noise(samples[:begin], rate)
            orders, floors = [], []
            for n in ORDERS:
                before = int(min(0.35, 0.3 * constant * np.log((n + 1) / n)) * rate)
                after = int((0.8 if n == 1 else min(0.8, 0.7 * constant * np.log(n / (n - 1)))) * rate)
                window = self.once(
                    ("window", n, before, after),
                    lambda: np.concatenate(
                        (
                            0.5 - 0.5 * np.cos(np.pi * np.minimum(1, np.arange(before) / (0.6 * before))),
                            0.5 - 0.5 * np.cos(np.pi * np.minimum(1, np.arange(after)[::-1] / (0.35 * after))),
                        )
                    ),
                )
                at = arrival - int(round(constant * np.log(n) * rate)) - before
                piece = np.take(response, np.arange(at, at + before + after), mode="wrap") * window
                points = fft.next_fast_len(max(2 * len(piece), int(rate / 1.5 / n)), real=True)
                transform = fft.rfft(piece, points)
                cells = self.log_means(power_of(transform), rate / points, n * edges)
                gain = 2 * (window**2).sum() / rate / constant
                parts = rooms[n - 1 : n]
                if silence is not None:
                    parts = [*parts, self.log_means(*silence, n * edges)]
                floor = gain * np.fmax.reduce(parts) if parts else np.zeros(len(cells))
                orders.append(cells)
                floors.append(floor)
            orders, floors = np.array(orders), np.array(floors)
            clean = orders - floors
            with np.errstate(invalid="ignore", divide="ignore"):
                thd = np.sqrt(np.nansum(np.maximum(clean[1:], 0), axis=0) / clean[0])
                quality = np.where(clean > 10**1.4 * floors, 2, np.where(clean > 10**0.6 * floors, 1, 0))
                spl = 10 * np.log10(clean) + scale
                floor_db = 10 * np.log10(floors) + scale
            bands = len(edges) // 8
            by_band = orders[:, : 8 * bands].reshape(9, bands, 8).mean(axis=2)
            floor_by_band = floors[:, : 8 * bands].reshape(9, bands, 8).mean(axis=2)
            levels.append((by_band[0] - floor_by_band[0], floor_by_band[0]))
            runs.append(
                {
                    "file": run["file"],
                    "peak": peak,
                    "latency_s": arrival / rate,
                    "spl_dB": np.round(spl, 2).tolist(),
                    "floor_dB": np.round(floor_db, 2).tolist(),
                    "quality": quality.tolist(),
                    "thd_percent": np.round(100 * thd, 4).tolist(),
                }
            )
        drives = np.array([run["level_dB"] for run in series["runs"]], float)
        clean = np.array([level for level, _ in levels])
        noise = np.array([floor for _, floor in levels])
        with np.errstate(invalid="ignore", divide="ignore"):
            gains = 10 * np.log10(clean) - drives[:, None]
            sigma = 4.34 * np.sqrt(2 * noise / clean / 10) + 0.02
        losses = gains[0] - gains
        text = json.dumps({"runs": runs, "bands": self.onsets(drives, gains, sigma, losses)})
        return text

    def laws(self, drives):
        """Loss of every shape at every drive and onset, [shapes, onsets, drives]."""
        knees = np.array([0.001, 1, 2, 3, 4, 6, 8, 10, 12, 14, 16, 20, 24])
        slopes = np.linspace(0, 0.8, 23)
        onsets = np.arange(drives[-1] - 34, drives[-1] + 1, 0.1)
        knee, slope = (a.ravel() for a in np.meshgrid(knees, slopes, indexing="ij"))
        excess = lambda loss: np.where(
            loss >= (1 - slope) * knee / 2,
            loss / (1 - slope),
            -knee / 2 + np.sqrt(2 * knee * loss / (1 - slope)),
        )
        x = drives[None, None, :] - onsets[None, :, None] + excess(THIRD_DB)[:, None, None]
        k, s = knee[:, None, None], slope[:, None, None]
        riding = np.where(2 * x <= -k, 0, np.where(2 * x >= k, (1 - s) * x, (1 - s) * (x + k / 2) ** 2 / (2 * k)))
        share = np.linspace(0.1, 0.95, 36)[:, None, None]
        two = -20 * np.log10(1 - share + share * 10 ** (-np.maximum(x[:1] + 1, 0) / 20))
        table = np.concatenate((riding, np.broadcast_to(two, (36,) + two.shape[1:])))
        return onsets, np.ascontiguousarray(table)

    def onsets(self, drives, gains, sigma, losses):
        onsets, table = self.once(("laws", tuple(drives)), lambda: self.laws(drives))
        found = []
        for b in range(gains.shape[1]):
            valid = np.isfinite(gains[:, b]) & np.isfinite(sigma[:, b])
            if valid.sum() < 2 or losses[valid, b][-1] < 0.12:
                found.append({"status": "not reached"})
                continue
            weight = np.where(valid, 1 / (sigma[:, b] ** 2 + 0.05**2 + (0.02 * losses[:, b]) ** 2), 0)
            gain = np.where(valid, gains[:, b] - gains[valid, b][0], 0)
            # As the engine, only where the runs allow the onset.
            last = int(np.argmax(losses[:, b] > THIRD_DB)) if (losses[:, b] > THIRD_DB).any() else len(drives) - 1
            near = slice(*np.searchsorted(onsets, (drives[max(0, last - 1)] - 0.5, drives[last] + 0.5)))
            rest = table[:, near] + gain
            mean = (rest @ weight) / weight.sum()
            chi = (rest**2) @ weight - weight.sum() * mean**2
            mass = np.exp(-0.5 * (chi - chi.min()))
            marginal = np.cumsum(mass.sum(axis=0))
            quantile = np.interp(np.array([0.05, 0.5, 0.95]) * marginal[-1], marginal, onsets[near])
            found.append({"status": "found", "onset_dB": np.round(quantile, 2).tolist()})
        return found


def main():
    folder, runs = sys.argv[1], int(sys.argv[2]) if len(sys.argv) > 2 else 1
    analysis = Analysis()
    warm, cpu = [], []
    for i in range(runs + (3 if runs > 1 else 0)):
        begin, used = time.perf_counter(), time.process_time()
        text = analysis.run(folder)
        warm.append(1000 * (time.perf_counter() - begin))
        cpu.append(1000 * (time.process_time() - used))
    keep = slice(3 if runs > 1 else 0, None)
    print(json.dumps({"warm_ms": float(np.median(warm[keep])), "warm_cpu_ms": float(np.median(cpu[keep])), "bytes": len(text)}))


main()
