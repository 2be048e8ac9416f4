package org.raysheaf.io.file;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIOException;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class AtomicFileTest {
    @TempDir
    private Path folder;

    private List<String> names() throws IOException {
        try (Stream<Path> files = Files.list(folder)) {
            return files.map(f -> f.getFileName().toString()).sorted().toList();
        }
    }

    @Test
    void putsTheWholeContentInPlaceAndLeavesNothingElse() throws IOException {
        Path target = folder.resolve("a.txt");

        AtomicFile.write(target, false, file -> Files.writeString(file, "new"));

        assertThat(target).hasContent("new");
        assertThat(names()).containsExactly("a.txt");
    }

    @Test
    void doesNotOverwriteUnlessAllowed() throws IOException {
        Path target = Files.writeString(folder.resolve("a.txt"), "old");

        assertThatIOException()
                .isThrownBy(() -> AtomicFile.write(target, false, file -> Files.writeString(file, "new")))
                .withMessage(target + ": exists already; choose another name, or allow it with --replace");
        assertThat(target).hasContent("old");

        AtomicFile.write(target, true, file -> Files.writeString(file, "new"));
        assertThat(target).hasContent("new");
    }

    @Test
    void doesNotOverwriteWhatCameUpMeanwhile() {
        Path target = folder.resolve("a.txt");

        assertThatIOException()
                .isThrownBy(() -> AtomicFile.write(target, false, file -> Files.writeString(target, "theirs")))
                .withMessageEndingWith("exists already; choose another name, or allow it with --replace");
        assertThat(target).hasContent("theirs");
    }

    @Test
    void leavesTheOldFileWhenWritingFails() throws IOException {
        Path target = Files.writeString(folder.resolve("a.txt"), "old");

        assertThatIOException()
                .isThrownBy(() -> AtomicFile.write(target, true, file -> {
                    Files.writeString(file, "half");
                    throw new IOException("disk full");
                }))
                .withMessage("disk full");
        assertThat(target).hasContent("old");
        assertThat(names()).containsExactly("a.txt");
    }

    @Test
    void leavesUnfinishedFilesOfOthersAlone() throws IOException {
        Files.writeString(folder.resolve(".a.txt.part0"), "theirs");

        AtomicFile.write(folder.resolve("a.txt"), false, file -> Files.writeString(file, "new"));

        assertThat(names()).containsExactly(".a.txt.part0", "a.txt");
    }

    @Test
    void namesAMissingFolderAndATargetThatIsAFolder() {
        Path target = folder.resolve("none").resolve("a.txt");

        assertThatIOException()
                .isThrownBy(() -> AtomicFile.write(target, false, file -> {}))
                .withMessage(target + ": expected a folder " + target.getParent() + ", found none; make it first");
        assertThatIOException()
                .isThrownBy(() -> AtomicFile.write(folder, true, file -> {}))
                .withMessage(folder + ": expected the name of a file, found a folder");
    }
}
