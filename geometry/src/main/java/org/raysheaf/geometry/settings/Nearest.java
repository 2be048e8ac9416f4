package org.raysheaf.geometry.settings;

import java.util.Collection;
import java.util.Comparator;

/** Finds the word that a mistyped one was probably meant to be. */
public final class Nearest {
    private Nearest() {}

    /**
     * The candidate with the smallest edit distance; the first one among equals.
     *
     * @param word the word that was found
     * @param candidates the words that it may have been meant to be, at least one
     * @return one of the candidates
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
