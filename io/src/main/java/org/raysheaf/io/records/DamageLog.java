package org.raysheaf.io.records;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** Counts records that cannot be read, keeps some of them as examples, and ends the import if the policy says so. One thread. */
final class DamageLog {
    private static final int EXAMPLES = 10;
    private static final int LONGEST_EXCERPT = 120;

    private final DamagePolicy policy;
    private final Map<String, Long> reasons = new LinkedHashMap<>();
    private final List<String> examples = new ArrayList<>();
    private long records;
    private long bytes;

    DamageLog(DamagePolicy policy) {
        this.policy = policy;
    }

    DamagePolicy policy() {
        return policy;
    }

    /**
     * Counts an unreadable record.
     *
     * @param file the file
     * @param place where in it, for example {@code byte 4096} or {@code line 17}
     * @param kind the reason without details, by which it is counted
     * @param details what was expected and found
     * @param excerpt the record itself, text or hexadecimal
     * @throws RecordException if the policy is to stop, or more records are unreadable than it bears
     */
    void unreadable(Path file, String place, String kind, String details, String excerpt) throws RecordException {
        String shown = excerpt.length() > LONGEST_EXCERPT ? excerpt.substring(0, LONGEST_EXCERPT) + " …" : excerpt;
        String message = file + ", " + place + ": " + details + "; the record: " + shown;
        if (policy.policy() == DamagePolicy.Policy.STOP) {
            throw new RecordException(message + "; to go on past such records, set damage: {policy: skip}"
                    + " or {policy: resynchronise} in the description");
        }
        records++;
        reasons.merge(kind, 1L, Long::sum);
        if (examples.size() < EXAMPLES) {
            examples.add(message);
        }
        if (records > policy.limit()) {
            throw new RecordException(
                    message + "; this is unreadable record " + records
                            + ", more than damage.limit; raise the limit, or correct the description if most records look like this");
        }
    }

    /** Counts bytes that were passed over in search of the next record. */
    void passedOver(long count) {
        bytes += count;
    }

    long records() {
        return records;
    }

    long bytes() {
        return bytes;
    }

    Map<String, Long> reasons() {
        return reasons;
    }

    List<String> examples() {
        return examples;
    }
}
