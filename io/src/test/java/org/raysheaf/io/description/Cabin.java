package org.raysheaf.io.description;

import java.time.Instant;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/** Settings with one component of every type, for tests. */
record Cabin(
        String name,
        Block block,
        List<Placement> placements,
        Map<String, Material> materials,
        @Default("prompt_only") Choice choice,
        @Default("[0, 0, 0]") Vector3 origin,
        @Default("1_000") String label,
        @Default("2e6") long events,
        @Default("true") boolean tidy,
        @Nullable Double energyKeV,
        @Nullable Block spare,
        Optional<Instant> start,
        @Default("[]") List<Vector3> points) {

    enum Choice {
        PROMPT_ONLY,
        DELAYED
    }

    record Material(double attenuationLengthMm) {}

    record Block(
            int columns,
            int rows,
            double pitchMm,
            @Default("0.5") double gapMm) {
        Block {
            new Problems("block")
                    .atLeast("columns", columns, 1)
                    .atLeast("rows", rows, 1)
                    .above("pitch_mm", pitchMm, 0)
                    .orThrow();
        }
    }

    sealed interface Placement permits RingPlacement, FreePlacement {}

    record RingPlacement(double radiusMm, @Default("0") double startAngleDeg) implements Placement {}

    record FreePlacement(Vector3 centre, @Nullable String remark) implements Placement {
        FreePlacement {
            if (centre.norm() > 1000) {
                throw new IllegalArgumentException("expected a centre within a metre, found " + centre.norm() + " mm");
            }
        }
    }

    /** A sound description with everything that has no default. */
    static final String TEXT = """
            raysheaf: cabin/1
            name: heron-12
            block:
              columns: 11
              rows: 11
              pitch_mm: 1.85
            placements:
              - kind: ring
                radius_mm: 42
              - kind: free
                centre: [0, 0, 60.5]
            materials:
              lso: {attenuation_length_mm: 11.5}
              lead:
                attenuation_length_mm: 0
            """;

    static Cabin read(String text) throws DescriptionException {
        return DescriptionReader.readText(text, "cabin.yaml", "cabin", Cabin.class);
    }
}
