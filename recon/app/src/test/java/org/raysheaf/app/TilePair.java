package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.SplittableRandom;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.ElementType;
import org.raysheaf.io.hdf5.Hdf5Writer;

/** Two facing tiles of 64 crystals, the smallest system that makes an image, and lists such as a few lines of h5py write. */
final class TilePair {
    static final String SYSTEM = """
            raysheaf: system/1
            name: pair
            field_of_view: {radius_mm: 10, length_mm: 24}
            materials: [{name: lyso, attenuation_length_mm: 12}]
            blocks:
              - {kind: crystal_block, name: tile, columns: 8, rows: 8, pitch_mm: [3, 3, 10], crystal_mm: [2.8, 2.8, 10], material: lyso}
            placements:
              - {kind: single, block: tile, centre_mm: [20, 0, 0], facing: [-1, 0, 0]}
              - {kind: single, block: tile, centre_mm: [-20, 0, 0], facing: [1, 0, 0]}
            """;

    static final int CRYSTALS = 64;

    private TilePair() {}

    /** Begins a list of some live time. */
    static Hdf5Writer begin(Path file, double liveTimeS) throws IOException {
        Hdf5Writer writer = Hdf5Writer.create(file, false);
        writer.root().attribute("raysheaf", "list/1");
        writer.root().attribute("live_time_s", liveTimeS);
        writer.root().attribute("start", "2026-12-01T09:00:00Z");
        writer.root().text("system", SYSTEM);
        return writer;
    }

    /** Pairs of crystals drawn at random, one in each tile. */
    static void randomPairs(Hdf5Writer writer, int events, SplittableRandom random) throws IOException {
        for (int tile = 0; tile < 2; tile++) {
            int[] values =
                    random.ints(events, CRYSTALS * tile, CRYSTALS * (tile + 1)).toArray();
            writer.root()
                    .column(tile == 0 ? "element_a" : "element_b", ElementType.UINT32, 1 << 10, Compression.NONE)
                    .append(values, 0, events);
        }
    }
}
