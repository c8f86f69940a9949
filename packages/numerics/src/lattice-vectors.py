"""Writes lattice-vectors.json: generating vectors of rank-1 lattices with a prime number n of points,
built component by component for the worst-case error in the Korobov space of smoothness 2 with
weights 1 / j^2, by fast convolution over the multiplicative group (Nuyens & Cools, Math. Comp. 75
(2006) 903). numpy 2, no randomness."""
import json
import pathlib

import numpy as np

SIZES = [251, 1021, 4093, 16381]
DIMENSIONS = 60


def primitive_root(n):
    factors, m, f = set(), n - 1, 2
    while m > 1:
        while m % f == 0:
            factors.add(f)
            m //= f
        f += 1
    return next(g for g in range(2, n) if all(pow(g, (n - 1) // q, n) != 1 for q in factors))


def vector(n):
    g = primitive_root(n)
    powers = np.array([pow(g, k, n) for k in range(n - 1)])
    inverse = powers[(-np.arange(n - 1)) % (n - 1)]
    kernel = lambda x: 2 * np.pi**2 * (x * x - x + 1 / 6)
    spectrum = np.fft.fft(kernel(powers / n))
    products = np.ones(n)
    x = np.arange(n)
    z = []
    for j in range(1, DIMENSIONS + 1):
        errors = np.real(np.fft.ifft(np.fft.fft(products[inverse]) * spectrum))
        errors = errors[: (n - 1) // 2]  # z and n - z are one lattice
        best = int(powers[int(np.argmin(np.round(errors / np.abs(errors).max(), 9)))])
        z.append(best)
        products *= 1 + kernel((x * best % n) / n) / j**2
    return z


out = pathlib.Path(__file__).with_name("lattice-vectors.json")
lattices = [{"points": n, "generators": vector(n)} for n in SIZES]
out.write_text(json.dumps({"source": " ".join(__doc__.split()), "lattices": lattices}, indent=1) + "\n")
