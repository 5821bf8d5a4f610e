"""Reference vectors for the spectrum station, made with NumPy and SciPy (Debian python3-numpy, python3-scipy).

Run: python3 spectrum_vectors.py > vectors.json
"""
import json

import numpy as np
import scipy
from scipy import signal, sparse
from scipy.sparse.linalg import spsolve

rng = np.random.default_rng(417)
n = 64
z = rng.normal(size=n) + 1j * rng.normal(size=n)
fourier = np.fft.fft(z)

dwell, broadening = 1e-3, 2.5
window = np.exp(-np.pi * broadening * dwell * np.arange(n))

x = np.exp(-0.5 * ((np.arange(n) - 30.2) / 3.1) ** 2)
hilbert = np.imag(signal.hilbert(x))

m = 40
y = np.sin(np.arange(m) / 6.0) + 0.1 * rng.normal(size=m)
weights = (rng.uniform(size=m) > 0.3).astype(float)
weights[[0, m - 1]] = 1.0
d2 = sparse.diags([1.0, -2.0, 1.0], [0, 1, 2], shape=(m - 2, m))
smooth = spsolve((sparse.diags(weights) + 50.0 * d2.T @ d2).tocsc(), weights * y)

zero, first = 0.7, -2.3
place = np.arange(n) / n - 0.5
turned = z * np.exp(-1j * (zero + first * place))

print(json.dumps({
    "made_with": {"numpy": np.__version__, "scipy": scipy.__version__},
    "fourier": {"in_re": z.real.tolist(), "in_im": z.imag.tolist(), "re": fourier.real.tolist(), "im": fourier.imag.tolist()},
    "window": {"dwell_s": dwell, "broadening_hz": broadening, "values": window.tolist()},
    "hilbert": {"in": x.tolist(), "values": hilbert.tolist()},
    "smoother": {"y": y.tolist(), "weights": weights.tolist(), "lambda": 50.0, "values": smooth.tolist()},
    "phase": {"zero_rad": zero, "first_rad": first, "re": turned.real.tolist(), "im": turned.imag.tolist()},
}, indent=1))
