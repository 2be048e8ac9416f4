"""Makes run.hdf5 and positions.csv: a table of pairs as a lab might keep it with h5py, from the first 25,000 pairs of heron-rods.h5.

Run it in this folder with a Python that has numpy and h5py. The table is a dataset of compound values, chunked and compressed. Crystals have the
lab's own numbers; a file tells where each of them is.
"""
import h5py
import numpy

PAIRS = 25_000

with h5py.File("../../heron-rods.h5") as f:
    pairs = {name: f[name][:PAIRS] for name in f if name.endswith(("_a", "_b", "_ps", "_keV")) or name == "delayed"}

# Where the crystals of heron-12 are: three rings of twelve blocks, 11 x 11 crystals each (the pitches of systems/heron-12.yaml).
element = numpy.arange(36 * 121)
block, row, column = element // 121, element // 11 % 11, element % 11
angle = 2 * numpy.pi * (block % 12) / 12
along = (column - 5) * 1.85
radius = 42 + 13 / 2
positions = numpy.stack(
    [
        radius * numpy.cos(angle) - along * numpy.sin(angle),
        radius * numpy.sin(angle) + along * numpy.cos(angle),
        (block // 12 - 1) * 20.8 + (row - 5) * 1.85,
    ],
    axis=1,
)
number = numpy.random.default_rng(8).permutation(10_000)[: len(element)]  # the lab's numbers have gaps and no order
with open("positions.csv", "w") as out:
    out.write("crystal,x_mm,y_mm,z_mm\n")
    for i in numpy.argsort(number):
        out.write(f"{number[i]},{positions[i, 0]:.3f},{positions[i, 1]:.3f},{positions[i, 2]:.3f}\n")

kind = numpy.dtype([("clock", "<u8"), ("first", "<u2"), ("second", "<u2"), ("e1", "<f4"), ("e2", "<f4"), ("dt", "<f4"), ("late", "?"), ("quality", "u1")])
table = numpy.zeros(PAIRS, kind)
table["clock"] = pairs["time_ps"] // 125  # ticks of 125 ps
table["first"] = number[pairs["element_a"]]
table["second"] = number[pairs["element_b"]]
table["e1"] = pairs["energy_a_keV"] * 1e-3
table["e2"] = pairs["energy_b_keV"] * 1e-3
table["dt"] = pairs["time_difference_ps"] * 1e-3
table["late"] = pairs["delayed"] == 1
table["quality"] = 200
table["quality"][::500] = 3

with h5py.File("run.hdf5", "w", track_order=False) as f:
    run = f.create_group("run_12")
    run.create_dataset("pairs", data=table, chunks=(4096,), compression="gzip", compression_opts=9, shuffle=True)
    run.create_dataset("temperature_C", data=numpy.full(60, 21.5, "f4"))
