#!/usr/bin/python3
"""Makes cascade-fit.json: a line fitted to a noisy sweep by scipy's least-squares optimizer, an independent program.

The forward model is written here from the formulas of the design and shares nothing with the program: chain (ABCD)
matrices with complex numbers, no derivatives, no scattering parameters. Two sections of cable, a resistance in series
with the second, an inductance at the joint, loss factors common to both, the length of the line, a load with some
inductance. There are no priors: the covariance is (J'J)^-1, residuals over the deviation that the noise was drawn with.

@source Pozar, Microwave Engineering, 4th ed., Table 4.1 (chain matrices); Wigington & Nahman, Proc. IRE 45(2), 1957
(skin effect); Djordjevic et al., IEEE Trans. EMC 43(4), 2001 (causal dielectric).
"""
import json
import os

import numpy
import scipy
from scipy.optimize import least_squares

C = 299_792_458.0
NEPER = 20 / numpy.log(10)
PORT = 50.0
F = numpy.linspace(20e6, 2000e6, 180)
W = 2 * numpy.pi * F
FIRST = {'z0Ohm': 50.0, 'velocityFactor': 0.66, 'k1': 0.59912, 'k2': 0.006739}
SECOND = {'z0Ohm': 50.0, 'velocityFactor': 0.89, 'k1': 0.11457, 'k2': 0.000462}
FIRST_LENGTH = 2.5
NOISE_DB = -50.0
# Ohm in series, where (m), henry at the joint, relative changes of both losses, end (m), load r + jw*tau (1, s).
PARAMETERS = ['seriesOhm', 'seriesAtM', 'jointHenry', 'conductor', 'dielectric', 'endM', 'loadRatio', 'loadS']
TRUTH = numpy.array([9.0, 6.2, 1.2e-9, 0.08, -0.1, 10.4, 1.4, 8e-12])
START = numpy.array([8.0, 6.202, 1.0e-9, 0.0, 0.0, 10.402, 1.3, 6e-12])
# Sizes that bring all parameters to about one.
SCALE = numpy.array([1e-1, 1e-3, 1e-11, 1e-2, 1e-2, 1e-3, 1e-2, 1e-13])


def cable(figures, conductor, dielectric):
    """Gamma and Zc of a cable; the changes of its losses act on gamma to first order and leave Zc alone."""
    velocity = figures['velocityFactor'] * C
    skin = 2 * figures['z0Ohm'] * figures['k1'] * numpy.sqrt(F / 1e6) / (100 * NEPER)
    tangent = 2 * velocity * figures['k2'] * (F / 1e6) / (100 * NEPER) / W
    series = 1j * W * figures['z0Ohm'] / velocity + skin * (1 + 1j)
    m = 2 / numpy.pi * numpy.arctan(tangent)
    ratio = 1j * W / (2 * numpy.pi * 1e9)
    shunt = 1j * W / (figures['z0Ohm'] * velocity) * ratio ** (-m)
    gamma = numpy.sqrt(series * shunt)
    per_conductor = gamma / 2 * skin * (1 + 1j) / series
    per_dielectric = -gamma / 2 * numpy.log(ratio) * 2 / numpy.pi * tangent / (1 + tangent**2)
    return gamma + conductor * per_conductor + dielectric * per_dielectric, numpy.sqrt(series / shunt)


def reflection(p):
    resistance, at, inductance, conductor, dielectric, end, load_ratio, load_s = p
    first, first_z = cable(FIRST, conductor, dielectric)
    second, second_z = cable(SECOND, conductor, dielectric)
    # The load is given against the impedance of the cable that it closes.
    voltage = (load_ratio + 1j * W * load_s) * second_z
    current = numpy.ones(F.shape, complex)

    def through(gamma, z, length):
        nonlocal voltage, current
        cosh, sinh = numpy.cosh(gamma * length), numpy.sinh(gamma * length)
        voltage, current = cosh * voltage + z * sinh * current, sinh / z * voltage + cosh * current

    through(second, second_z, end - at)
    voltage = voltage + resistance * current
    through(second, second_z, at - FIRST_LENGTH)
    voltage = voltage + 1j * W * inductance * current
    through(first, first_z, FIRST_LENGTH)
    return (voltage - PORT * current) / (voltage + PORT * current)


random = numpy.random.default_rng(20)
sigma = 10 ** (NOISE_DB / 20) / numpy.sqrt(2)
measured = reflection(TRUTH) + sigma * (random.standard_normal(F.size) + 1j * random.standard_normal(F.size))
# Rounded as it is written, so that both fits see the same numbers.
measured = numpy.round(measured, 9)


def residuals(scaled):
    left = (measured - reflection(scaled * SCALE)) / sigma
    return numpy.concatenate([left.real, left.imag])


fit = least_squares(
    residuals, START / SCALE, method='lm', xtol=1e-15, ftol=1e-15, gtol=1e-15, diff_step=1e-7, max_nfev=20000
)
# Derivatives by central differences at the answer, for a covariance to six digits.
jacobian = numpy.empty((2 * F.size, TRUTH.size))
for k in range(TRUTH.size):
    step = numpy.zeros(TRUTH.size)
    step[k] = 1e-4
    jacobian[:, k] = (residuals(fit.x + step) - residuals(fit.x - step)) / 2e-4
covariance = numpy.linalg.inv(jacobian.T @ jacobian) * numpy.outer(SCALE, SCALE)

out = {
    'scipy': scipy.__version__,
    'numpy': numpy.__version__,
    'frequencyHz': F.tolist(),
    're': measured.real.tolist(),
    'im': measured.imag.tolist(),
    'noiseDb': NOISE_DB,
    'first': FIRST,
    'second': SECOND,
    'firstLengthM': FIRST_LENGTH,
    'truth': TRUTH.tolist(),
    'start': START.tolist(),
    'parameters': PARAMETERS,
    'fitted': (fit.x * SCALE).tolist(),
    'covariance': covariance.tolist(),
    'cost': float(2 * fit.cost),
}
path = os.path.join(os.path.dirname(os.path.abspath(__file__)), 'cascade-fit.json')
with open(path, 'w') as file:
    json.dump(out, file, indent=1)
    file.write('\n')
print('fitted', out['fitted'], 'sigmas', numpy.sqrt(numpy.diag(covariance)), 'cost', out['cost'])
