package org.raysheaf.io.hdf5;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;

class LzfTest {
    /** By hand: three literals "abc", then six bytes from three back, then one long copy of one byte. */
    @Test
    void copiesMayOverlapWhatTheyMake() {
        byte[] stored = {2, 'a', 'b', 'c', (byte) (4 << 5), 2, (byte) (7 << 5), 11, 0};
        byte[] plain = Lzf.decode(stored, 3 + 6 + 20);
        assertThat(new String(plain, StandardCharsets.US_ASCII)).isEqualTo("abcabcabc" + "c".repeat(20));
    }

    @Test
    void unsoundDataGiveNothingWhateverTheyAre() {
        SplittableRandom random = new SplittableRandom(2);
        for (int i = 0; i < 50_000; i++) {
            byte[] junk = new byte[random.nextInt(40)];
            random.nextBytes(junk);
            int expected = 1 + random.nextInt(100);
            assertThat(Lzf.decode(junk, expected).length).isIn(0, expected);
        }
    }
}
