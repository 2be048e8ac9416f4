package org.raysheaf.bench;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;

/**
 * A program in C that makes the same passes over the same file of lines, compiled on the spot. It takes the arguments
 *
 * <pre>
 * EVENTS.f32 NX NY NZ VOXEL_MM THREADS PASSES [SENSITIVITY.f32 IMAGE_OUT.f32]
 * </pre>
 *
 * <p>and prints two lines, {@code plain} and {@code tuned}, each with a throughput in millions of events per second. With the last
 * two arguments it makes PASSES updates from 1 wherever the sensitivity is above 0. Volumes are floats, x fastest.
 */
final class Yardstick {
    private static final Pattern LINE = Pattern.compile("(plain|tuned)\\s+([0-9.]+)\\s+Mevents/s");

    private final Path folder;
    private final Path program;
    private final List<String> problem;

    private Yardstick(Path folder, Path program, List<String> problem) {
        this.folder = folder;
        this.program = program;
        this.problem = problem;
    }

    /** Events per second, in millions. */
    record Throughput(double plain, double tuned) {}

    /** Compiles the program into a folder; it will run on the given problem. */
    static Yardstick compile(Path source, Path folder, Path lines, Grid grid, int threads) throws IOException {
        Path program = folder.resolve("yardstick");
        String flags = "-O3 -march=native -ffast-math -fopenmp";
        List<String> command = new ArrayList<>(List.of("gcc"));
        command.addAll(List.of(flags.split(" ")));
        command.addAll(List.of(source.toString(), "-o", program.toString(), "-lm"));
        run(command);
        List<String> problem = List.of(
                lines.toString(),
                Integer.toString(grid.nx()),
                Integer.toString(grid.ny()),
                Integer.toString(grid.nz()),
                Double.toString(grid.spacingXMm()),
                Integer.toString(threads));
        return new Yardstick(folder, program, problem);
    }

    Throughput throughput() throws IOException {
        return parse(run(command("1")));
    }

    /** The image after some passes. */
    Image image(Image sensitivity, int passes) throws IOException {
        Path given = folder.resolve("sensitivity.f32");
        Path result = folder.resolve("image.f32");
        write(given, sensitivity);
        List<String> command = command(Integer.toString(passes));
        command.addAll(List.of(given.toString(), result.toString()));
        run(command);
        return read(result, sensitivity.grid());
    }

    private List<String> command(String passes) {
        List<String> command = new ArrayList<>(List.of(program.toString()));
        command.addAll(problem);
        command.add(passes);
        return command;
    }

    private static Throughput parse(String output) throws IOException {
        double plain = Double.NaN;
        double tuned = Double.NaN;
        Matcher matcher = LINE.matcher(output);
        while (matcher.find()) {
            double value = Double.parseDouble(matcher.group(2));
            if ("plain".equals(matcher.group(1))) {
                plain = value;
            } else {
                tuned = value;
            }
        }
        if (!(plain > 0 && tuned > 0)) {
            throw new IOException("expected the yardstick to print plain and tuned throughputs, found: " + output);
        }
        return new Throughput(plain, tuned);
    }

    private static String run(List<String> command) throws IOException {
        Process process = new ProcessBuilder(command).redirectErrorStream(true).start();
        try (var output = process.getInputStream()) {
            String text = new String(output.readAllBytes(), StandardCharsets.UTF_8);
            if (process.waitFor() != 0) {
                throw new IOException(String.join(" ", command) + " failed: " + text);
            }
            return text;
        } catch (InterruptedException e) {
            process.destroy();
            Thread.currentThread().interrupt();
            throw new IOException("interrupted", e);
        }
    }

    private static void write(Path file, Image image) throws IOException {
        byte[] bytes = new byte[Float.BYTES * image.grid().voxels()];
        ByteBuffer buffer = ByteBuffer.wrap(bytes).order(ByteOrder.LITTLE_ENDIAN);
        for (int at : xFastest(image.grid())) {
            buffer.putFloat(image.values()[at]);
        }
        Files.write(file, bytes);
    }

    private static Image read(Path file, Grid grid) throws IOException {
        ByteBuffer buffer = ByteBuffer.wrap(Files.readAllBytes(file)).order(ByteOrder.LITTLE_ENDIAN);
        Image image = new Image(grid);
        for (int at : xFastest(grid)) {
            image.values()[at] = buffer.getFloat();
        }
        return image;
    }

    /** The indices of all voxels, x fastest, then y, then z. */
    private static int[] xFastest(Grid grid) {
        int[] order = new int[grid.voxels()];
        int next = 0;
        for (int z = 0; z < grid.nz(); z++) {
            for (int y = 0; y < grid.ny(); y++) {
                for (int x = 0; x < grid.nx(); x++) {
                    order[next++] = grid.index(x, y, z);
                }
            }
        }
        return order;
    }
}
