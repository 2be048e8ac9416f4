package org.raysheaf.io.records;

import java.util.HexFormat;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.settings.Default;
import org.raysheaf.geometry.settings.Problems;

/**
 * What to do about a record that cannot be read.
 *
 * @param policy what to do
 * @param limit the most unreadable records that are passed over; one more ends the import
 * @param marker for {@code resynchronise}: the bytes that every record of a binary stream begins with, hexadecimal such as {@code "a5 5a"}
 */
public record DamagePolicy(
        @Default("stop") Policy policy,
        @Default("1000") long limit,
        @Nullable String marker) {
    /** What to do about a record that cannot be read. */
    public enum Policy {
        /** End with an error that shows the record. */
        STOP,
        /** Count it and go on with the next line, or the record length further. */
        SKIP,
        /** Count it and go on at the next marker. */
        RESYNCHRONISE
    }

    public DamagePolicy {
        Problems problems = new Problems("damage").atLeast("limit", (double) limit, 0);
        problems.rule(
                policy != Policy.RESYNCHRONISE || (marker != null && isHex(marker)),
                "marker",
                "expected the bytes that records begin with, hexadecimal such as \"a5 5a\", found " + marker);
        problems.orThrow();
    }

    private static boolean isHex(String text) {
        try {
            return HexFormat.of().parseHex(text.replace(" ", "")).length > 0;
        } catch (IllegalArgumentException e) {
            return false;
        }
    }

    /** The marker's bytes; only with the policy that needs them. */
    byte[] markerBytes() {
        return marker == null ? new byte[0] : HexFormat.of().parseHex(marker.replace(" ", ""));
    }
}
