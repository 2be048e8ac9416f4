package org.raysheaf.engine.correct;

import java.util.Arrays;
import org.raysheaf.geometry.response.LineOfResponse;
import org.raysheaf.geometry.response.PairVisitor;

/** Remembers which elements the pairs of a block of events are of. */
final class NumberedPairs implements PairVisitor {
    private int[] elements = new int[1 << 10];
    private int size;

    /** Hears of pairs of elements. */
    interface Hearer {
        void pair(int a, int b);
    }

    @Override
    public void pair(int a, int b, LineOfResponse line) {
        if (size == elements.length) {
            elements = Arrays.copyOf(elements, 2 * size);
        }
        elements[size++] = a;
        elements[size++] = b;
    }

    void forEach(Hearer hearer) {
        for (int i = 0; i < size; i += 2) {
            hearer.pair(elements[i], elements[i + 1]);
        }
    }
}
