#!/usr/bin/python3
"""Makes windows.json: window values from scipy (1.10), an independent program.

Cosine and Kaiser windows are taken at the middle of each n-th of the span: the odd samples of the symmetric
window of 2n + 1 points. Dolph-Chebyshev is scipy's symmetric window of n points. Bessel: scipy.special.i0.
"""
import json
import os

from scipy.signal import windows
from scipy.special import i0


def middles(name, n):
    return windows.get_window(name, 2 * n + 1, fftbins=False)[1::2].tolist()


names = {
    'hann': 'hann',
    'hamming': 'hamming',
    'blackman': 'blackman',
    'blackman-harris': 'blackmanharris',
    'kaiser:2.5': ('kaiser', 2.5),
    'kaiser:6': ('kaiser', 6.0),
    'kaiser:14': ('kaiser', 14.0),
}
out = {
    'middles': {text: middles(name, 9) for text, name in names.items()},
    'dolphChebyshev': [
        {'n': n, 'sideLobeDb': db, 'values': windows.chebwin(n, db).tolist()}
        for n, db in ((8, 60), (13, 50), (24, 100))
    ],
    'besselI0': [{'x': x, 'value': float(i0(x))} for x in (0, 0.5, 1, 3.75, 10, 29.9, 30.1, 100, 600)],
}
path = os.path.join(os.path.dirname(os.path.abspath(__file__)), 'windows.json')
with open(path, 'w') as file:
    json.dump(out, file, indent=1)
    file.write('\n')
