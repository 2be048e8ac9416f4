package org.raysheaf.io.scratch;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.EOFException;
import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.stream.Stream;
import org.junit.jupiter.api.Assumptions;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.condition.EnabledOnOs;
import org.junit.jupiter.api.condition.OS;
import org.junit.jupiter.api.io.TempDir;
import org.raysheaf.geometry.port.Scratch;

final class ScratchFolderTest {
    @TempDir
    private Path folder;

    @Test
    void givesBackWhatWasWritten() throws Exception {
        try (Scratch.File file = new ScratchFolder(folder.resolve("new")).open()) {
            assertThat(file.append(ByteBuffer.wrap(new byte[] {1, 2, 3}))).isZero();
            assertThat(file.append(ByteBuffer.wrap(new byte[] {4, 5}))).isEqualTo(3);
            ByteBuffer three = ByteBuffer.allocate(3);
            file.read(1, three);
            assertThat(three.array()).containsExactly(2, 3, 4);
            assertThatThrownBy(() -> file.read(4, ByteBuffer.allocate(2))).isInstanceOf(EOFException.class);
        }
        assertThat(names(folder.resolve("new"))).isZero();
    }

    /** After a crash nobody is left to remove it. */
    @Test
    @EnabledOnOs({OS.LINUX, OS.MAC})
    void hasNoNameWhileItIsOpen() throws Exception {
        try (Scratch.File file = new ScratchFolder(folder).open()) {
            file.append(ByteBuffer.wrap(new byte[10]));
            assertThat(names(folder)).isZero();
        }
    }

    /** On /dev/full every write fails as on a full disk. */
    @Test
    @EnabledOnOs(OS.LINUX)
    void saysWhatToDoWhenTheDiskIsFull() throws Exception {
        Path full = Path.of("/dev/full");
        Assumptions.assumeTrue(Files.exists(full), "needs /dev/full");
        try (Scratch.File file = new ScratchFolder.Open(full, FileChannel.open(full, StandardOpenOption.WRITE))) {
            assertThatThrownBy(() -> file.append(ByteBuffer.wrap(new byte[10])))
                    .isInstanceOf(IOException.class)
                    .hasMessageStartingWith(
                            "/dev: the events do not fit into memory, and writing them to disk failed after"
                                    + " 0.0 MB (No space left on device); free some space there, choose another place with --scratch DIR");
        }
    }

    private static long names(Path where) throws IOException {
        try (Stream<Path> files = Files.list(where)) {
            return files.count();
        }
    }
}
