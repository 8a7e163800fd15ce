"""The engine's two measured jobs in plain numpy, timed here: one line in (a job's name), one line out (seconds)."""
import sys
import time
import numpy as np

TS = 1 / 30.72e6
rate = float(sys.argv[2])
x = np.fromfile(sys.argv[1], dtype=np.complex64)


def block_sums(lag, hop):
    c = x[lag:] * np.conj(x[:-lag])
    n = len(c) // hop
    return c[: n * hop].reshape(n, hop).sum(axis=1)


def correlations():
    for lag in range(1000, 11000, 1000):
        block_sums(lag, 16)


def prefixes(mu, extended):
    if extended:
        return [512 * TS / 2**mu] * (6 * 2**mu)
    return [(144 / 2**mu + (16 if l == 0 else 0)) * TS for l in range(7 * 2**mu)]


def hypothesis(mu, extended):
    useful = 1 / (15e3 * 2**mu)
    lag = round(useful * rate)
    hop = max(1, lag // 64)
    c = block_sums(lag, hop)
    c = c - c.mean()
    bins = round(0.5e-3 * rate / hop)
    at = np.floor(((np.arange(len(c)) + 0.5) * hop / (0.5e-3 * rate)) % 1 * bins).astype(int)
    profile = np.bincount(at, c.real, bins) + 1j * np.bincount(at, c.imag, bins)
    mask = np.zeros(bins)
    start = 0.0
    starts = []
    for p in prefixes(mu, extended):
        starts.append(start + p)
        mask[int(start / 0.5e-3 * bins) : int((start + p) / 0.5e-3 * bins)] = 1
        start += p + useful
    q = np.fft.ifft(np.fft.fft(profile) * np.conj(np.fft.fft(mask)))
    origin = np.argmax(np.abs(q)) / bins * 0.5e-3
    begins = [int((origin + k * 0.5e-3 + s) * rate) for k in range(40) for s in starts]
    begins = np.array([b for b in begins if b + lag <= len(x)])
    return np.fft.fft(x[begins[:, None] + np.arange(lag)], axis=1)


def four_hypotheses():
    for mu, extended in [(0, False), (1, False), (2, False), (2, True)]:
        hypothesis(mu, extended)


jobs = {"correlations": correlations, "hypotheses": four_hypotheses}
for line in sys.stdin:
    begin = time.perf_counter()
    jobs[line.strip()]()
    print(time.perf_counter() - begin, flush=True)
