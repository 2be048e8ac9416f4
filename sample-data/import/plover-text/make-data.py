"""Makes pairs.txt and channels.csv: what the invented electronics "plover" would have written of the first 25,000 pairs of heron-rods.h5.

Run it in this folder with a Python that has numpy and h5py. Plover counts channels in its own way: 36 modules of 128 channels, of which 121 are
connected, the crystals of a module in an order that only its cabling knows; amplitudes are in its own units, with another gain for every channel.
"""
import h5py
import numpy

PAIRS = 25_000

random = numpy.random.default_rng(5)
with h5py.File("../../heron-rods.h5") as f:
    columns = {name: f[name][:PAIRS] for name in f if name.endswith(("_a", "_b", "_ps", "_keV")) or name == "delayed"}
    elements = 36 * 121

# Which channel of which module reads which crystal, and with what gain (keV per unit).
channel = numpy.empty(elements, int)
for module in range(36):
    channel[module * 121 : (module + 1) * 121] = module * 128 + random.permutation(128)[:121]
gain = random.normal(2.0, 0.1, elements).round(4)
with open("channels.csv", "w") as out:
    out.write("# channel = 128 * module + channel in the module\nchannel,element,gain_keV\n")
    for element in numpy.argsort(channel):
        out.write(f"{channel[element]},{element},{gain[element]}\n")

with open("pairs.txt", "w") as out:
    out.write("# plover 3.1, list of coincidences, decimal comma\n")
    out.write("t / us;module A;channel A;amplitude A;module B;channel B;amplitude B;dt / ns;delayed;temperature\n")
    for i in range(PAIRS):
        a, b = columns["element_a"][i], columns["element_b"][i]
        line = (
            f"{columns['time_ps'][i] * 1e-6:.6f};{channel[a] // 128};{channel[a] % 128};{columns['energy_a_keV'][i] / gain[a]:.2f}"
            f";{channel[b] // 128};{channel[b] % 128};{columns['energy_b_keV'][i] / gain[b]:.2f}"
            f";{columns['time_difference_ps'][i] * 1e-3:.3f};{columns['delayed'][i]};21.5"
        )
        out.write(line.replace(".", ",") + "\n")
