"""Reference values for the stability of layered fluids, by SciPy and mpmath; prints JSON.

Three kinds: characteristic values of Mathieu's equation (scipy.special); roots of the secular determinant of viscous
layers at rest, assembled from the interface conditions and found in 40 digits (mpmath); the same for two half spaces
of equal kinematic viscosity (Chandrasekhar, Hydrodynamic and Hydromagnetic Stability, 1961, section 94).
"""

import json

import mpmath
import numpy
import scipy
from mpmath import mp, mpc, mpf
from scipy.special import mathieu_a, mathieu_b

mp.dps = 40


def mathieu(q):
    return {
        "q": q,
        "a0": float(mathieu_a(0, q)),
        "b1": float(mathieu_b(1, q)),
        "a1": float(mathieu_a(1, q)),
        "b2": float(mathieu_b(2, q)),
        "a2": float(mathieu_a(2, q)),
    }


def secular(n, k, gravity, layers, tensions):
    """Determinant of all conditions for W ~ exp(nt); layers bottom first as (density, viscosity, thickness or None)."""
    count = len(layers)
    matrix = mpmath.zeros(4 * count, 4 * count)
    row = 0
    roots = []
    for density, viscosity, _ in layers:
        q = mpmath.sqrt(k * k + n * density / viscosity)
        roots.append((k, -k, q, -q))

    def terms(layer, z):
        # Each exponential is 1 at the face from which it decays, so that all entries are of ordinary size.
        thickness = layers[layer][2]
        for p in roots[layer]:
            reference = 0 if mpmath.re(p) < 0 else (thickness if thickness is not None else 0)
            yield p, mpmath.exp(p * (z - reference))

    def wall(layer, z):
        nonlocal row
        for column, (p, e) in enumerate(terms(layer, z)):
            matrix[row, 4 * layer + column] = e
            matrix[row + 1, 4 * layer + column] = p * e / k
        row += 2

    def far(layer, growing_away):
        nonlocal row
        for column in growing_away:
            matrix[row, 4 * layer + column] = 1
            row += 1

    # Half spaces have their face at z = 0 and nothing that grows away from it.
    if layers[0][2] is None:
        far(0, (1, 3))
    else:
        wall(0, mpf(0))
    for i in range(count - 1):
        lower, upper = layers[i], layers[i + 1]
        top = lower[2] if lower[2] is not None else mpf(0)
        stiffness = (lower[0] - upper[0]) * gravity * k**2 + tensions[i] * k**4
        for layer, z, sign in ((i, top, -1), (i + 1, mpf(0), 1)):
            density, viscosity, _ = layers[layer]
            for column, (p, e) in enumerate(terms(layer, z)):
                at = 4 * layer + column
                normal = density * n * p - viscosity * (p * p - k * k) * p + 2 * viscosity * k * k * p
                matrix[row, at] = sign * e
                matrix[row + 1, at] = sign * p * e / k
                matrix[row + 2, at] = sign * viscosity * (p * p + k * k) * e
                matrix[row + 3, at] = sign * normal * e
                if sign < 0:
                    matrix[row + 3, at] -= stiffness / n * e
        row += 4
    last = count - 1
    if layers[last][2] is None:
        far(last, (0, 2))
    else:
        wall(last, layers[last][2])
    # Columns of a layer become dependent where q = k or q = 0; divided out.
    spurious = mpf(1)
    for _, _, q, _ in roots:
        spurious *= q * (q - k) ** 2
    return mpmath.det(matrix) / spurious


def numbers(layers, tensions):
    return [tuple(None if x is None else mpf(x) for x in layer) for layer in layers], [mpf(x) for x in tensions]


def swinging(start, k, gravity, layers, tensions):
    """The root near a complex start."""
    layers, tensions = numbers(layers, tensions)
    k, gravity, start = mpf(k), mpf(gravity), mpc(start)
    scale = secular(start * mpc(1.01, 0.013), k, gravity, layers, tensions)
    found = mpmath.findroot(lambda n: secular(n, k, gravity, layers, tensions) / scale, start, maxsteps=200)
    return {"rate": float(found.real), "frequency": abs(float(found.imag))}


def falling(k, gravity, layers, tensions):
    """The largest real root: below the free fall rate sqrt(gk), where the determinant first changes sign."""
    layers, tensions = numbers(layers, tensions)
    k, gravity = mpf(k), mpf(gravity)
    high = mpmath.sqrt(gravity * k)
    before = secular(high, k, gravity, layers, tensions)
    for _ in range(400):
        low = high * mpf("0.97")
        here = secular(low, k, gravity, layers, tensions)
        if (here > 0) != (before > 0):
            found = mpmath.findroot(
                lambda n: secular(n, k, gravity, layers, tensions) / before, (low, high), solver="anderson", maxsteps=200
            )
            return {"rate": float(found), "frequency": 0.0}
        high, before = low, here
    raise ValueError("nothing falls")


def main():
    rest = {
        # Bottom first, as strings so that no digit is lost. Half spaces: None.
        "falling liquid over air": falling(
            "144.749", "9.81",
            [("1.2", "1.8e-5", None), ("970", "0.485", None)], ["0.0211"]),
        "K1 at rest": swinging(
            mpc(-4, 40), "475.843", "9.8066",
            [("1346", "7.2e-3", "1.6e-3"), ("949", "20e-3", "8.4e-3")], ["0.035"]),
        "K1 upside down": falling(
            "150", "9.8066",
            [("949", "20e-3", "8.4e-3"), ("1346", "7.2e-3", "1.6e-3")], ["0.005"]),
        "water, oil, air": swinging(
            mpc(-9, 52), "536.518", "9.81",
            [("998", "1.0e-3", "10e-3"), ("960", "0.048", "5e-3"), ("1.2", "1.8e-5", "20e-3")],
            ["0.040", "0.0208"]),
        "levitated slab falling": falling(
            "62.8", "9.80665",
            [("1.2", "1.82e-5", "40e-3"), ("971", "0.971", "15e-3"), ("1.2", "1.82e-5", None)],
            ["0.0212", "0.0212"]),
    }
    fall = []
    for atwood in ("0.01", "0.1", "0.25", "0.5", "0.9"):
        a = mpf(atwood)
        for k in ("0.2", "0.5", "1"):
            light = (1 - a) / (1 + a)
            found = falling(k, 1, [(light, light, None), (1, 1, None)], [0])
            fall.append({"atwood": float(a), "k": float(k), "rate": found["rate"]})
    print(json.dumps({
        "versions": {"numpy": numpy.__version__, "scipy": scipy.__version__, "mpmath": mpmath.__version__},
        "mathieu": [mathieu(q) for q in (0.5, 1.0, 2.0, 5.0)],
        "at rest": rest,
        "fall of equal kinematic viscosity": fall,
    }, indent=1))


main()
