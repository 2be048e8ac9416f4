package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.Map;
import org.jspecify.annotations.Nullable;
import org.raysheaf.engine.correct.GeometryFactors;
import org.raysheaf.geometry.response.BlockPairKinds;
import org.raysheaf.io.efficiency.EfficiencyFile;
import org.raysheaf.io.file.Sha256;

/** What an efficiency file says of a system: efficiencies of its elements, and the factors of its block geometry if the file has them. */
final class Normalization {
    private final EfficiencyFile file;
    private final @Nullable GeometryFactors geometry;

    private Normalization(EfficiencyFile file, @Nullable GeometryFactors geometry) {
        this.file = file;
        this.geometry = geometry;
    }

    static Normalization read(Path path, Systems systems) throws IOException {
        EfficiencyFile file = EfficiencyFile.read(path);
        file.requireSystem(systems.text(), systems.system().elements());
        EfficiencyFile.Geometry stored = file.geometry().orElse(null);
        if (stored == null) {
            return new Normalization(file, null);
        }
        try {
            return new Normalization(
                    file,
                    new GeometryFactors(
                            new BlockPairKinds(systems.system()), stored.pair(), stored.column(), stored.row()));
        } catch (IllegalArgumentException e) {
            throw new IOException(
                    path + ": its factors of block geometry do not fit the system: " + e.getMessage()
                            + "; make the file again with: raysheaf normalize",
                    e);
        }
    }

    double[] efficiencies() {
        return file.efficiencies();
    }

    @Nullable
    GeometryFactors geometry() {
        return geometry;
    }

    /** What the report says of it. */
    Map<String, Object> row(String name) {
        Map<String, Object> row = new LinkedHashMap<>();
        row.put("file", name);
        row.put("silent_elements", file.silent().size());
        if (geometry != null) {
            double[] pair = geometry.pair();
            row.put("smallest_factor_of_block_pairs", Arrays.stream(pair).min().orElse(1));
            row.put("largest_factor_of_block_pairs", Arrays.stream(pair).max().orElse(1));
        }
        return row;
    }

    /** Of all that changes a sensitivity. */
    String digest() {
        StringBuilder text = new StringBuilder(Arrays.toString(efficiencies()));
        if (geometry != null) {
            text.append(Arrays.toString(geometry.pair()))
                    .append(Arrays.toString(geometry.column()))
                    .append(Arrays.toString(geometry.row()));
        }
        return Sha256.ofText(text.toString());
    }
}
