package org.raysheaf.engine.ray;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.Comparator;
import java.util.Random;
import org.junit.jupiter.api.Test;

final class RayOrderTest {
    @Test
    void sortsByTheUpperHalfAndKeepsTheOrderOfEquals() {
        Random random = new Random(31);
        for (int n : new int[] {0, 1, 2, 1000, 70_000}) {
            long[] entries = new long[n + 2];
            for (int i = 0; i < entries.length; i++) {
                entries[i] = (long) (random.nextInt() & (n > 10 ? -1 : 1)) << 32 | (entries.length - i);
            }
            Long[] expected = Arrays.stream(entries, 1, n + 1).boxed().toArray(Long[]::new);
            Arrays.sort(expected, Comparator.comparing((Long entry) -> entry >>> 32));
            long first = entries[0];
            long last = entries[n + 1];
            RayOrder.sort(entries, 1, n + 1);
            assertThat(Arrays.stream(entries, 1, n + 1).boxed().toArray()).isEqualTo(expected);
            assertThat(entries[0]).isEqualTo(first);
            assertThat(entries[n + 1]).isEqualTo(last);
        }
    }
}
