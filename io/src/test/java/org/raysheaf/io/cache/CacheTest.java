package org.raysheaf.io.cache;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class CacheTest {
    @TempDir
    private Path folder;

    @Test
    void findsWhatItKept() throws IOException {
        Cache cache = new Cache(folder.resolve("deep/er"));
        assertThat(cache.find("table", "abc")).isEmpty();
        cache.keep("table", "abc", new float[] {1, -2.5f, 3e-20f});
        assertThat(cache.find("table", "abc")).hasValue(new float[] {1, -2.5f, 3e-20f});
        assertThat(cache.find("table", "abd")).isEmpty();
    }

    @Test
    void takesADamagedEntryForAbsent() throws IOException {
        Cache cache = new Cache(folder);
        cache.keep("table", "abc", new float[] {1, 2, 3});
        Path file = folder.resolve("table-abc.cache");
        byte[] sound = Files.readAllBytes(file);
        for (int at = 0; at < sound.length; at++) {
            byte[] damaged = sound.clone();
            damaged[at] ^= 4;
            Files.write(file, damaged);
            assertThat(cache.find("table", "abc")).isEmpty();
        }
        Files.write(file, Arrays.copyOf(sound, sound.length - 1));
        assertThat(cache.find("table", "abc")).isEmpty();
    }

    @Test
    void digestDependsOnOrderAndBoundaries() {
        assertThat(Cache.digest("ab", "c"))
                .isNotEqualTo(Cache.digest("a", "bc"))
                .isNotEqualTo(Cache.digest("c", "ab"));
        assertThat(Cache.digest("ab", "c")).isEqualTo(Cache.digest("ab", "c")).hasSize(64);
    }
}
