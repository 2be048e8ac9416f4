package org.raysheaf.io.records;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** The reasons for which records are set aside, each with a number from 1 and a count. Not safe for use by several threads. */
final class Reasons {
    private final List<String> texts = new ArrayList<>();
    private long[] counts = new long[16];

    /** The number of a reason; the same text has the same number. */
    int number(String text) {
        int known = texts.indexOf(text);
        if (known >= 0) {
            return known + 1;
        }
        texts.add(text);
        if (texts.size() >= counts.length) {
            counts = Arrays.copyOf(counts, 2 * counts.length);
        }
        return texts.size();
    }

    /** Counts records by their fates. */
    void count(int[] fates, int size) {
        for (int i = 0; i < size; i++) {
            counts[fates[i]]++;
        }
    }

    void count(int number) {
        counts[number]++;
    }

    /** Counts by reason, without those that never occurred. */
    Map<String, Long> counts() {
        Map<String, Long> found = new LinkedHashMap<>();
        for (int i = 0; i < texts.size(); i++) {
            if (counts[i + 1] > 0) {
                found.put(texts.get(i), counts[i + 1]);
            }
        }
        return found;
    }
}
