import hashlib
import sys
import h5py


def text(value):
    return value.decode("utf-8") if isinstance(value, bytes) else str(value)


def describe(name, thing):
    for key, value in thing.attrs.items():
        print(f"{name}.{key}|{text(value)}")
    if isinstance(thing, h5py.Dataset) and thing.ndim == 1:
        print(f"{name}|{thing.dtype}|{len(thing)}|{hashlib.sha256(thing[:].tobytes()).hexdigest()}")


with h5py.File(sys.argv[1], "r") as f:
    describe("", f)
    f.visititems(describe)
    system = f["system"]
    matches = hashlib.sha256(system[()]).hexdigest() == text(system.attrs["sha256"])
    print("system.sha256 " + ("matches" if matches else "differs"))
