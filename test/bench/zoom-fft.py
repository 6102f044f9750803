"""Times scipy.signal.zoom_fft on a windowed sweep; prints medians in ms as JSON.

Usage: zoom-fft.py POINTS BINS REPEATS
"""

import json
import sys
import time

import numpy
import scipy
from scipy.signal import ZoomFFT, zoom_fft

points, bins, repeats = (int(word) for word in sys.argv[1:4])
rng = numpy.random.default_rng(1)
sweep = rng.standard_normal(points) + 1j * rng.standard_normal(points)
window = numpy.kaiser(points, 6)


def median_ms(run):
    for _ in range(repeats // 5 + 1):
        run()
    times = []
    for _ in range(repeats):
        started = time.perf_counter()
        run()
        times.append(time.perf_counter() - started)
    return 1000 * sorted(times)[len(times) // 2]


planned = ZoomFFT(points, [0, 0.4], m=bins, fs=2)
print(
    json.dumps(
        {
            "scipy": scipy.__version__,
            "functionMs": median_ms(lambda: zoom_fft(sweep * window, [0, 0.4], m=bins, fs=2)),
            "plannedMs": median_ms(lambda: planned(sweep * window)),
        }
    )
)
