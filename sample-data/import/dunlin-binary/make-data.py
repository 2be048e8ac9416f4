"""Makes run.dat and map.npy: what the invented digitiser "dunlin" would have written of the photons in the first 25,000 pairs of heron-rods.h5.

Run it in this folder with a Python that has numpy and h5py. Dunlin knows nothing of pairs: it writes single photons. Each block of crystals has four
light sensors at its corners; which crystal it was follows from how they share the light.

run.dat, big-endian. A header of 64 bytes, then records of 10 bytes. Bit 79 is the first bit of a record:

    bits 76-79   type
    1 photon     70-75 block, 60-69 sensor a, 50-59 b, 40-49 c, 30-39 d, 0-27 time (20 ps)
    2 overflow   the time counter of 28 bits went around
    5 gate       0 the bed stood still (1) or moved (0)
    9 rates      0-31 photons in the last 10 ms
"""
import h5py
import numpy

PAIRS = 25_000
TICK_PS = 20
RANGE = 1 << 28
UNITS_PER_KEV = 2.0

with h5py.File("../../heron-rods.h5") as f:
    prompt = f["delayed"][:PAIRS] == 0
    a, b = f["element_a"][:PAIRS][prompt], f["element_b"][:PAIRS][prompt]
    time = f["time_ps"][:PAIRS][prompt]
    difference = numpy.rint(f["time_difference_ps"][:PAIRS][prompt]).astype(int)
    energy = numpy.concatenate([f["energy_a_keV"][:PAIRS][prompt], f["energy_b_keV"][:PAIRS][prompt]])

element = numpy.concatenate([a, b]).astype(int)
tick = numpy.concatenate([time, time + difference]).clip(0) // TICK_PS
order = numpy.argsort(tick, kind="stable")

# The map: a lattice of 11 x 11 crystals seen at 66 x 66 positions; between crystals nothing.
cell = numpy.arange(66)
crystal = numpy.where(cell % 6 == 5, -1, cell // 6)
numpy.save("map.npy", numpy.where((crystal[:, None] < 0) | (crystal < 0), -1, crystal[:, None] * 11 + crystal).astype("i2"))


def record(kind, *fields):
    value = kind << 76
    for bits, shift in fields:
        value |= int(bits) << shift
    return value.to_bytes(10, "big")


with open("run.dat", "wb") as out:
    out.write(b"DUNLIN 2  run 41  finch bay".ljust(64, b"\0"))
    out.write(record(5, (1, 0)))
    turns, photons, rates = 0, 0, 0
    for i in order:
        while tick[i] // RANGE > turns:
            turns += 1
            out.write(record(2))
        while tick[i] * TICK_PS // 10_000_000_000 > rates:
            rates += 1
            out.write(record(9, (photons, 0)))
            photons = 0
        column, row = element[i] % 11, element[i] // 11 % 11
        x, y = (6 * column + 2.5) / 66, (6 * row + 2.5) / 66
        light = energy[i] * UNITS_PER_KEV
        sensors = [light * (1 - x) * (1 - y), light * x * (1 - y), light * (1 - x) * y, light * x * y]
        s = numpy.rint(sensors).astype(int).clip(0, 1023)
        out.write(record(1, (element[i] // 121, 70), (s[0], 60), (s[1], 50), (s[2], 40), (s[3], 30), (tick[i] % RANGE, 0)))
        photons += 1
