package org.raysheaf.io.checkpoint;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.port.Snapshot;

final class CheckpointFileTest {
    @TempDir
    private Path folder;

    private static Snapshot snapshot(double value) {
        Snapshot snapshot = new Snapshot();
        snapshot.put("image", new float[] {1e-30f, (float) value, Float.MIN_VALUE});
        snapshot.put("other", new float[] {7});
        snapshot.put("sum", Math.PI * value, -1e-300);
        return snapshot;
    }

    @Test
    void givesBackEveryBitOfTheLatest() throws Exception {
        CheckpointFile file = new CheckpointFile(folder.resolve("whole.h5"), "key");
        assertThat(file.latest()).isEmpty();
        file.save(snapshot(1));
        file.save(snapshot(2));
        Snapshot read = file.latest().orElseThrow();
        assertThat(read.images().keySet()).containsExactly("image", "other");
        assertThat(read.values("image", 3)).isEqualTo(snapshot(2).values("image", 3));
        assertThat(read.numbers("sum")).isEqualTo(snapshot(2).numbers("sum"));
    }

    @Test
    void refusesThatOfOtherSettings() throws Exception {
        Path path = folder.resolve("whole.h5");
        new CheckpointFile(path, "key").save(snapshot(1));
        assertThatThrownBy(() -> new CheckpointFile(path, "other key").latest())
                .isInstanceOf(IOException.class)
                .hasMessageContaining("expected the checkpoint of the same list with the same settings");
    }

    @Test
    void noticesDamage() throws Exception {
        Path path = folder.resolve("whole.h5");
        CheckpointFile file = new CheckpointFile(path, "key");
        Snapshot large = new Snapshot();
        large.put("image", new float[1000]);
        file.save(large);
        byte[] bytes = Files.readAllBytes(path);
        bytes[bytes.length / 2] ^= 4;
        Files.write(path, bytes);
        assertThatThrownBy(file::latest).isInstanceOf(IOException.class);
    }

    @Test
    void removesWhatAKilledProgramLeft() throws Exception {
        Files.createFile(folder.resolve(".whole.h5.123-abc.partial"));
        new CheckpointFile(folder.resolve("whole.h5"), "key").save(snapshot(1));
        try (Stream<Path> files = Files.list(folder)) {
            assertThat(files).containsExactly(folder.resolve("whole.h5"));
        }
    }

    @Test
    void keepsTheOneBeforeWhenTheDiskTakesNoMore() throws Exception {
        Path path = folder.resolve("whole.h5");
        CheckpointFile file = new CheckpointFile(path, "key");
        file.save(snapshot(1));
        Snapshot impossible = new Snapshot();
        impossible.put("a/b", new float[] {1}); // a name that no dataset can have stands for any failure on the way
        assertThatThrownBy(() -> file.save(impossible)).isInstanceOf(Exception.class);
        assertThat(file.latest().orElseThrow().values("other", 1)).containsExactly(7);
        try (Stream<Path> files = Files.list(folder)) {
            assertThat(files).containsExactly(path);
        }
    }
}
