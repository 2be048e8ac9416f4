package org.raysheaf.app;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.ForkJoinPool;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.description.DescriptionReader;

/**
 * The system that the elements of a list refer to: the one that the list carries, or one named beside the list if it carries none. If there are
 * both they must say the same; spelling, order of keys and comments may differ.
 */
final class SystemOfList {
    private SystemOfList() {}

    /**
     * Finds the system.
     *
     * @param header of the list
     * @param list the list's file, for messages
     * @param beside a system description named beside the list, or null
     */
    static Systems of(
            ListHeader header, Path list, @Nullable Path beside, Common common, ForkJoinPool pool, Progress progress)
            throws IOException {
        String own = header.systemDescription();
        if (own.isBlank()) {
            if (beside == null) {
                throw new IOException(list + ": expected a system description in the list, found none; name one in a"
                        + " reconstruction with the line \"system: SYSTEM.yaml\", or write its text into the list as"
                        + " the dataset system");
            }
            return Systems.read(beside, common, pool, progress);
        }
        if (beside != null) {
            requireSame(
                    DescriptionReader.readText(own, list + " (its system)", "system", SystemDescription.class),
                    list,
                    DescriptionReader.read(beside, "system", SystemDescription.class),
                    beside);
        }
        return Systems.of(own, list + " (its system)", common, pool, progress);
    }

    private static void requireSame(SystemDescription own, Path list, SystemDescription named, Path beside)
            throws IOException {
        if (own.equals(named)) {
            return;
        }
        List<String> differing = new ArrayList<>();
        differs(differing, "name", own.name(), named.name());
        differs(differing, "field_of_view", own.fieldOfView(), named.fieldOfView());
        differs(differing, "pairs", own.pairs(), named.pairs());
        differs(differing, "materials", own.materials(), named.materials());
        differs(differing, "blocks", own.blocks(), named.blocks());
        differs(differing, "placements", own.placements(), named.placements());
        differs(differing, "shields", own.shields(), named.shields());
        throw new IOException(beside + ": expected the system that " + list + " carries, \"" + own.name()
                + "\", found \"" + named.name() + "\", which differs"
                + (differing.isEmpty() ? "" : " in " + String.join(", ", differing))
                + "; take the line system out of the reconstruction, or name the right list");
    }

    private static void differs(List<String> differing, String name, Object own, Object named) {
        if (!own.equals(named)) {
            differing.add(name);
        }
    }
}
