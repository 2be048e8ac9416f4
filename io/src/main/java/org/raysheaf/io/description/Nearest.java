package org.raysheaf.io.description;

import java.util.Collection;
import java.util.Comparator;

/** Finds the word that a mistyped one was probably meant to be. Safe for use by several threads. */
public final class Nearest {
    private Nearest() {}

    /**
     * The candidate with the smallest edit distance.
     *
     * @param word what was written
     * @param candidates what could have been meant, at least one
     * @return one of the candidates; the first among equals
     */
    public static String to(String word, Collection<String> candidates) {
        return candidates.stream()
                .min(Comparator.comparingInt(candidate -> distance(word, candidate)))
                .orElseThrow();
    }

    /** Levenshtein distance: the fewest insertions, deletions and replacements that turn one word into the other. */
    static int distance(String a, String b) {
        int[] previous = new int[b.length() + 1];
        for (int j = 0; j <= b.length(); j++) {
            previous[j] = j;
        }
        for (int i = 1; i <= a.length(); i++) {
            int[] current = new int[b.length() + 1];
            current[0] = i;
            for (int j = 1; j <= b.length(); j++) {
                int replaced = previous[j - 1] + (a.charAt(i - 1) == b.charAt(j - 1) ? 0 : 1);
                current[j] = Math.min(replaced, 1 + Math.min(previous[j], current[j - 1]));
            }
            previous = current;
        }
        return previous[b.length()];
    }
}
