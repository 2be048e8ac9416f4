package org.raysheaf.io.file;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.api.Test;

class Sha256Test {
    /** The example of FIPS 180-4 for the message "abc" [M]; sha256sum prints the same. */
    @Test
    void isThePlainDigestOfTheBytes() {
        assertThat(Sha256.ofText("abc")).isEqualTo("ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
    }
}
