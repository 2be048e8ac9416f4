package org.raysheaf.io.description;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class FirstLineTest {
    @TempDir
    private Path folder;

    private Path file(byte... content) throws IOException {
        return Files.write(folder.resolve("a.yaml"), content);
    }

    private Path file(String content) throws IOException {
        return file(content.getBytes(StandardCharsets.UTF_8));
    }

    private void assertRefused(Path path, String message) {
        assertThatExceptionOfType(DescriptionException.class)
                .isThrownBy(() -> DescriptionReader.read(path, "cabin", Cabin.class))
                .withMessage(path + message);
    }

    @Test
    void tellsTheKindOfAFileWhateverItsVersionAndTheRest() throws IOException {
        assertThat(DescriptionReader.kindOf(file("\uFEFF\n# note\n---\nraysheaf: 'phantom/7' # so\n\t]")))
                .isEqualTo("phantom");
    }

    @Test
    void readsAFile() throws IOException {
        assertThat(DescriptionReader.read(file(Cabin.TEXT), "cabin", Cabin.class))
                .isEqualTo(Cabin.read(Cabin.TEXT));
    }

    @Test
    void tellsForeignOtherAndFutureFilesApart() throws IOException {
        assertRefused(
                file("\nname: x\n"),
                ", line 2: expected a first line of the form \"raysheaf: system/1\", found \"name: x\"; this is no"
                        + " description of ours");
        assertRefused(
                file("raysheaf: cabin\n"),
                ", line 1: expected a first line of the form \"raysheaf: system/1\", found \"raysheaf: cabin\"; this is no"
                        + " description of ours");
        assertRefused(
                file("raysheaf: phantom/1\n"),
                ", line 1: expected a description of kind cabin, found one of kind phantom; name the right file");
        assertRefused(
                file("raysheaf: cabin/2\n"),
                ", line 1: expected cabin/1, found cabin/2; the file is too new for this version of Raysheaf");
    }

    @Test
    void refusesFilesThatAreNoText() throws IOException {
        assertRefused(file(""), ": expected a description, found nothing but blanks");
        assertRefused(file("# only\n"), ": expected a description, found only comments");
        assertRefused(
                file((byte) 0x89, (byte) 'H', (byte) 'D', (byte) 'F'),
                ": expected text in UTF-8, found the byte 0x89 at offset 0; is this a data file?");
        assertRefused(
                file("raysheaf: cabin/1\nname: a\0b\n"),
                ", line 2, column 8: expected text, found the character U+0000; is this a data file?");
        assertRefused(
                file(new byte[DescriptionText.LARGEST + 1]),
                ": expected a description of at most 16777216 bytes, found 16777217");
        assertRefused(folder.resolve("none.yaml"), ": expected a description, found no such file");
        assertRefused(folder, ": expected a description, found a folder");
    }
}
