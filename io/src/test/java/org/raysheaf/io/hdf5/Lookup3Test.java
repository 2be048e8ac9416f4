package org.raysheaf.io.hdf5;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import org.junit.jupiter.api.Test;

class Lookup3Test {
    @Test
    void givesTheValuesPublishedWithTheFunction() {
        // Bob Jenkins, lookup3.c (2006), driver5: hashlittle of "" and of the 30 characters below, initial value 0
        assertThat(hash("")).isEqualTo(0xdeadbeef);
        assertThat(hash("Four score and seven years ago")).isEqualTo(0x17770551);
    }

    private static int hash(String text) {
        byte[] bytes = text.getBytes(StandardCharsets.US_ASCII);
        return Lookup3.hash(ByteBuffer.wrap(bytes), bytes.length);
    }
}
