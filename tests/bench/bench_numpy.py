# SPDX-License-Identifier: GPL-3.0-or-later
"""Measures against numpy and scipy (Debian's packages), plain Lua, and a loop fused by hand in C.

Every row prints what is required and what was measured, as ratios within this one run: peers and ours alternate, and the best
of several rounds counts. Exit status 1 where a row falls short. Ours runs as a user runs it: the program on a script, or the C functions.
"""
import os
import re
import subprocess
import sys
import time

for name in ("OPENBLAS_CORETYPE", "OPENBLAS_L2_SIZE"):  # settings for other libraries that would slow numpy
    if name in os.environ:
        os.environ.pop(name)
        os.execv(sys.executable, [sys.executable] + sys.argv)

import numpy as np
from scipy.special import j0

BUILD = os.environ.get("LACUNA_BUILD", "build")
LACUNA = os.environ.get("LACUNA", BUILD + "/lacuna")
LUA = os.environ.get("LUA", "lua5.4")
ROUNDS = 5
short = []


def row(what, required, measured, at_most=False, unit="times"):
    good = measured <= required if at_most else measured >= required
    sense = "at most" if at_most else "at least"
    print(f"{what:<66} {sense:>8} {required:6.2f} {unit:<6} {measured:7.2f} {'good' if good else 'FALLS SHORT'}", flush=True)
    if not good:
        short.append(what)


def timed(function):
    start = time.perf_counter()
    function()
    return time.perf_counter() - start


def best(*functions, rounds=ROUNDS):
    """The best time of each function, all alternating."""
    results = [float("inf")] * len(functions)
    for _ in range(rounds):
        for i, function in enumerate(functions):
            result = function()
            results[i] = result if getattr(function, "is_best_so_far", False) else min(results[i], result)
    return results


def peer(function):
    return lambda: timed(function)


def script(code, repeats=4, threads=1, program=None):
    """Seconds for one pass of a script that does its work `n` times: start-up and set-up are taken out by running it with n = 1 and more."""
    command = [program] if program else [LACUNA, f"--threads={threads}"]

    def run(n):
        source = code.replace("$N", str(n))
        return timed(lambda: subprocess.run(command + ["-e", source], check=True, stdout=subprocess.DEVNULL))

    shortest = {1: float("inf"), 1 + repeats: float("inf")}

    def measure():  # the best of each length, then their difference: the least difference would be the luckiest pair
        for n in shortest:
            shortest[n] = min(shortest[n], run(n))
        return max(1e-9, (shortest[1 + repeats] - shortest[1]) / repeats)

    measure.is_best_so_far = True
    return measure


def kernels():
    """What the C measurements print: name -> ns an element."""
    text = subprocess.run([BUILD + "/tests/bench/bench_kernels"], check=True, capture_output=True, text=True).stdout
    return {name: float(value) for name, value in re.findall(r"^(\w+) ([\d.]+)$", text, re.M)}


def fused():
    text = subprocess.run([BUILD + "/tests/bench/bench_fused"], check=True, capture_output=True, text=True).stdout
    return float(text) * 1e-9 * 1e7


def has_avx512():
    try:
        return "avx512f" in open("/proc/cpuinfo").read()
    except OSError:
        return False


def planck_and_bessel():
    wavelength = np.linspace(1e-6, 20e-6, 10_000_000)
    temperature = np.linspace(300, 3000, 10_000_000)
    h, k, c = 6.62607015e-34, 1.380649e-23, 299792458.0
    x = np.linspace(0, 50, 1_000_000)

    def numpy_planck():
        return 2 * h * c / wavelength**3 / np.expm1(h * c / (wavelength * k * temperature))

    rounds = []
    numpy_time = scipy_time = float("inf")
    for _ in range(3):
        numpy_time = min(numpy_time, timed(numpy_planck))
        scipy_time = min(scipy_time, timed(lambda: j0(x)))
        rounds.append(kernels())
    ours = {name: min(r[name] for r in rounds) for name in rounds[0]}
    numpy_ns, scipy_ns = numpy_time * 1e9 / wavelength.size, scipy_time * 1e9 / x.size
    print(f"Planck function: {ours['planck_nu']:.2f} ns an element, numpy {numpy_ns:.1f}; J0: {ours['j0']:.2f}, scipy {scipy_ns:.1f}")
    row("Planck function, 1e7 elements, one core, against numpy", 7 if has_avx512() else 10, numpy_ns / ours["planck_nu"])
    row("J0, 1e6 arguments up to 50, one core, against scipy", 5, scipy_ns / ours["j0"])


CHAIN = """
local given = case { bolometric_flux = sweep("1e-11 W.m**-2", "9e-11 W.m**-2", 10000000), distance = "156 pc", wavelength = "1.65 um", projected_baseline = "130 m" }
for i = 1, $N do
  local c <close> = given:with {} -- a new case each time: all eight steps are computed; closed, its memory serves the next
  local resolved <close> = c.rim_resolved_by_array:stored()
end
"""


def chain():
    """stellar_luminosity, heating_luminosity, sublimation_radius, rim_radius, rim_radius_angle, rim_size_angle, rim_elements_by_array,
    rim_resolved_by_array: eight relations over ten million fluxes."""
    flux = np.linspace(1e-11, 9e-11, 10_000_000)
    distance, temperature, sigma = 156 * 3.0856775814913673e16, 1500.0, 5.670374419184429454e-8
    resolution = 1.65e-6 / (2 * 130)

    def numpy_chain():
        luminosity = 4 * np.pi * distance**2 * flux
        heating = +luminosity
        radius = np.sqrt(heating / (16 * np.pi * sigma * temperature**4))
        rim = +radius
        angle = rim / distance
        size = 2 * angle
        elements = size / resolution
        return (elements >= 1).astype(float)

    numpy_time, ours, both, loop = best(peer(numpy_chain), script(CHAIN, 40), script(CHAIN, 40, threads=2), fused)
    print(f"chain of eight relations: {ours * 100:.2f} ns an element, two threads {both * 100:.2f}, numpy {numpy_time * 100:.1f}, fused by hand {loop * 100:.2f}")
    row("chain of eight relations, 1e7 elements, against numpy", 10, numpy_time / ours)
    print(f"the chain on one core takes {ours / loop:.2f} times the loop fused by hand, which runs on one core too")
    row("the same as run by default, times a loop fused by hand", 2, min(ours, both) / loop, at_most=True)


HILL = """
local given = case { planet_semi_major_axis = along("a", {$A}) * au, planet_star_mass_ratio = along("q", {$Q}) }
for i = 1, 400 * $N do
  local c <close> = given:with {} -- a new case each time; closed, its memory serves the next
  local grid <close> = c.hill_radius:stored()
end
"""


def hill():
    a, q = np.linspace(1, 100, 1000), np.linspace(1e-5, 1e-2, 1000)
    full_a, full_q = (np.ascontiguousarray(g) for g in np.broadcast_arrays(a[:, None], q[None, :]))
    code = HILL.replace("$A", ",".join(map(repr, a))).replace("$Q", ",".join(map(repr, q)))
    one, two = script(code, repeats=8), script(code, repeats=8, threads=2)
    broadcast, full, ours, both = best(peer(lambda: a[:, None] * np.cbrt(q / 3)[None, :]), peer(lambda: full_a * np.cbrt(full_q / 3)), one, two)
    ours, both = ours / 400, both / 400
    print(f"Hill radii, 1000 by 1000: {ours * 1e3:.3f} ns an element, two threads {both * 1e3:.3f}, numpy broadcast {broadcast * 1e3:.3f}, full arrays {full * 1e3:.2f}")
    row("Hill radii on a 1000 by 1000 grid, against numpy's broadcast", 2, broadcast / min(ours, both))
    row("the same, against numpy over full arrays", 15, full / min(ours, both))


DRAWS = """
settings { draws = 1000000 }
for i = 1, $N do
  local c = case { bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", distance = "156 ± 3 pc", sublimation_temperature = "1500 ± 50 K",
    absorption_efficiency_ratio = "1.5 ± 0.1", wavelength = "1.65 ± 0.02 um", projected_baseline = "130 ± 2 m" }
  assert(chance(c.rim_resolved_by_array) > 0)
  c = nil
  collectgarbage()
end
"""

PLAIN_LUA = """
local function normal(m, s) return m + s * math.sqrt(-2 * math.log(1 - math.random())) * math.cos(2 * math.pi * math.random()) end
for i = 1, $N do
  local resolved = 0
  for j = 1, 1000000 do
    local F, d, T, Q = normal(2.4e-11, 0.2e-11), normal(156, 3) * 3.0856775814913673e16, normal(1500, 50), normal(1.5, 0.1)
    local w, B = normal(1.65e-6, 0.02e-6), normal(130, 2)
    local L = 4 * math.pi * d * d * F
    local R = math.sqrt(Q * L / (16 * math.pi * 5.670374419184429454e-8 * T^4))
    if 2 * R / d >= w / (2 * B) then resolved = resolved + 1 end
  end
  assert(resolved > 0)
end
"""


def draws():
    rng = np.random.default_rng(1)

    def numpy_draws():
        n = 1_000_000
        F, d = rng.normal(2.4e-11, 0.2e-11, n), rng.normal(156, 3, n) * 3.0856775814913673e16
        T, Q = rng.normal(1500, 50, n), rng.normal(1.5, 0.1, n)
        w, B = rng.normal(1.65e-6, 0.02e-6, n), rng.normal(130, 2, n)
        L = 4 * np.pi * d * d * F
        R = np.sqrt(Q * L / (16 * np.pi * 5.670374419184429454e-8 * T**4))
        return np.mean(2 * R / d >= w / (2 * B))

    numpy_time, ours, both, lua = best(peer(numpy_draws), script(DRAWS, 8), script(DRAWS, 8, threads=2), script(PLAIN_LUA, 1, program=LUA), rounds=3)
    print(f"six uncertain givens to a verdict: {ours * 1e3:.1f} ns a draw, two threads {both * 1e3:.1f}, numpy {numpy_time * 1e3:.0f}, plain Lua {lua * 1e3:.0f}")
    row("a million draws of six givens to a verdict, one core, against numpy", 4, numpy_time / ours)
    row("the same on two cores", 8, numpy_time / both)
    row("the same, one core, against plain Lua", 12, lua / ours)


MANY = """
settings { draws = 100000000 }
local c = case { bolometric_flux = "2.4e-11 ± 0.2e-11 W.m**-2", distance = "156 ± 3 pc", sublimation_temperature = "1500 ± 50 K",
  absorption_efficiency_ratio = "1.5 ± 0.1", wavelength = "1.65 ± 0.02 um", projected_baseline = "130 ± 2 m" }
print(chance(c.rim_resolved_by_array), interval(c.rim_radius))
"""


def most_memory(process):
    """The greatest resident memory of a running process, in MiB, by looking again and again (what wait reports counts the parent's too)."""
    most = 0.0
    while process.poll() is None:
        try:
            found = re.search(r"VmHWM:\s+(\d+)", open(f"/proc/{process.pid}/status").read())
            most = max(most, int(found.group(1)) / 1024 if found else 0)
        except OSError:
            pass
        time.sleep(0.002)
    return most if process.returncode == 0 else float("inf")


def memory():
    start = time.perf_counter()
    most = most_memory(subprocess.Popen([LACUNA, "-e", MANY], stdout=subprocess.DEVNULL))
    print(f"chance and interval over 1e8 draws: {time.perf_counter() - start:.1f} s")
    row("memory for chance and interval over 1e8 draws", 100, most, at_most=True, unit="MiB")


CHECKED = """
local a, b = 5 * au, 3 * pc
for i = 1, 4000000 * $N do local c = a * b end
"""

IN_TABLES = """
local mt = {}
mt.__mul = function(a, b)
  local da, db, d = a.dimension, b.dimension, {}
  for i = 1, 6 do d[i] = da[i] + db[i] end
  return setmetatable({ value = a.value * b.value, dimension = d }, mt)
end
local a = setmetatable({ value = 5, dimension = { 1, 0, 0, 0, 0, 0 } }, mt)
local b = setmetatable({ value = 3, dimension = { 1, 0, 0, 0, 0, 0 } }, mt)
for i = 1, 4000000 * $N do local c = a * b end
"""


def language():
    ours, tables = best(script(CHECKED, 1), script(IN_TABLES, 1, program=LUA))
    print(f"a checked multiply in Lua: {ours / 4e6 * 1e9:.0f} ns, in tables and metatables {tables / 4e6 * 1e9:.0f} ns")
    row("a checked multiply, share of the same in pure Lua", 0.4, ours / tables, at_most=True)


def mie_spheres():
    """200 wavelengths from 0.1 um to 3 mm by 200 radii from 0.005 um to 1 mm, as in bench_optics.c: size parameters and indices."""
    wavelength, radius = 0.1 * 3e4 ** (np.arange(200) / 199), 0.005 * 2e5 ** (np.arange(200) / 199)
    frequency = 1 / wavelength
    square = 1 + 1.7 / (1 - (0.09 * frequency) ** 2 - 0.02j * frequency) + 1.2 / (1 - (10 * frequency) ** 2 - 3j * frequency)
    x = 2 * np.pi * radius[None, :] / wavelength[:, None]
    return x.ravel(), np.repeat(np.sqrt(square), 200)


def numpy_mie(x, m, terms):
    """Extinction of spheres of about one size, all orders of them side by side: Bohren & Huffman 1983, Eqs. 4.61, 4.62, 4.88."""
    z = m * x
    size = np.abs(z).max()
    start = int(max(terms, size) + 8 * np.cbrt(size) + 16)
    derivative, kept, inverse = np.zeros_like(z), np.empty((terms + 1, x.size), complex), 1 / z
    for n in range(start, 0, -1):
        ratio = n * inverse
        derivative = ratio - 1 / (derivative + ratio)
        if n <= terms + 1:
            kept[n - 1] = derivative
    psi_before, psi, chi_before, chi = np.cos(x), np.sin(x), -np.sin(x), np.cos(x)
    extinction, scattering = np.zeros_like(x), np.zeros_like(x)
    for n in range(1, terms + 1):
        up, over = (2 * n - 1) / x, n / x
        psi_before, psi = psi, up * psi - psi_before
        chi_before, chi = chi, up * chi - chi_before
        xi_before, xi = psi_before - 1j * chi_before, psi - 1j * chi
        electric, magnetic = kept[n] / m + over, kept[n] * m + over
        a = (electric * psi - psi_before) / (electric * xi - xi_before)
        b = (magnetic * psi - psi_before) / (magnetic * xi - xi_before)
        extinction += (2 * n + 1) * (a.real + b.real)
        scattering += (2 * n + 1) * (a.real**2 + a.imag**2 + b.real**2 + b.imag**2)
    return 2 * extinction / x**2, 2 * scattering / x**2


MIE_PIECE = 400  # spheres side by side, sorted by size; half or twice as many take numpy some 15 % longer


def mie_table():
    x, m = mie_spheres()
    order = np.argsort(x)

    def numpy_table():
        for i in range(0, x.size, MIE_PIECE):
            piece = order[i : i + MIE_PIECE]
            greatest = x[piece].max()
            with np.errstate(all="ignore"):
                numpy_mie(x[piece], m[piece], int(greatest + 6 * np.cbrt(greatest) + 6))

    def ours(program, *names):
        text = subprocess.run([f"{BUILD}/tests/bench/{program}"], capture_output=True, text=True).stdout
        return tuple(float(re.search(rf"^{name} ([\d.]+)$", text, re.M).group(1)) for name in names)

    rounds = [
        (timed(numpy_table), *ours("bench_optics", "mie_table", "mie_table_complex"), *ours("bench_dust", "opacity_table_one", "opacity_table_two", "planck_mean"))
        for _ in range(2)
    ]
    numpy_time, table, plain, one, two, mean = (min(r[i] for r in rounds) for i in range(6))
    print(f"Mie table, 40 000 spheres: {table:.3f} s, numpy {numpy_time:.2f}, a loop in double complex {plain:.2f}")
    row("Mie table, one core, against numpy", 40, numpy_time / table)
    row("the same, against a loop in double complex", 10, plain / table)
    print(f"opacity table of 200 wavelengths by 200 sizes: {one:.3f} s, two threads {two:.3f}")
    row("opacity table, one core, against numpy's Mie efficiencies alone", 40, numpy_time / one)
    row("the same on two cores", 80, numpy_time / two)
    row("Planck mean from a table", 50, mean, at_most=True, unit="us")


def demo():
    times = [timed(lambda: subprocess.run([LACUNA, "scripts/demo_study.lua"], check=True, stdout=subprocess.DEVNULL)) for _ in range(5)]
    print(f"the demo study: {min(times) * 1e3:.0f} ms")
    row("the demo study", 1, min(times), at_most=True, unit="s")


for measure in (planck_and_bessel, chain, hill, draws, memory, language, mie_table, demo):
    measure()
sys.exit(1 if short else 0)
