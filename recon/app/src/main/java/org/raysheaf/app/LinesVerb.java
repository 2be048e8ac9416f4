package org.raysheaf.app;

import java.io.BufferedOutputStream;
import java.io.IOException;
import java.io.OutputStream;
import java.nio.ByteBuffer;
import java.nio.ByteOrder;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.concurrent.ForkJoinPool;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.response.CoincidenceSheaves;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.io.file.AtomicFile;
import org.raysheaf.io.hdf5.ColumnWriter;
import org.raysheaf.io.hdf5.Compression;
import org.raysheaf.io.hdf5.ElementType;
import org.raysheaf.io.hdf5.Hdf5Writer;
import org.raysheaf.io.list.ListFile;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** The lines of response of a list, for other programs. */
@Command(
        name = "lines",
        description = "End points (mm) of the line of response of every usable event, in the order of the list.")
final class LinesVerb extends Verb {
    private static final int BLOCK = 1 << 16;
    private static final String[] COLUMNS = {"x1_mm", "y1_mm", "z1_mm", "x2_mm", "y2_mm", "z2_mm"};

    @Parameters(paramLabel = "LIST.h5", description = "The list.")
    private Path input;

    @Option(
            names = "--out",
            required = true,
            paramLabel = "FILE",
            description = ".csv: text with a header line; .f32: six little-endian floats per event; .h5: six columns.")
    private Path out;

    LinesVerb() {}

    /** Takes the rays of one block after another. */
    private interface Target {
        void accept(SheafBundle rays) throws IOException;
    }

    @Override
    void run() throws IOException {
        common().requireFree(out);
        String name = out.toString();
        if (!name.endsWith(".csv") && !name.endsWith(".f32") && !name.endsWith(".h5")) {
            throw new IOException(out + ": expected a name that ends in .csv, .f32 or .h5");
        }
        ForkJoinPool pool = common().pool();
        ListFile opened = ListFile.open(input);
        Reconstruction.requirePairs(input, opened);
        Systems systems = SystemOfList.of(opened.header(), input, null, common(), pool, common().progress());
        ListFile list = opened.withElements(systems.system().elements());
        CoincidenceSheaves sheaves = systems.sheaves();
        EventTally tally =
                name.endsWith(".h5") ? toHdf5(list, sheaves) : toStream(list, sheaves, name.endsWith(".csv"));
        common().print(
                        Map.of("file", name, "lines", tally.used(), "read", tally.read()),
                        List.of(tally.used() + " lines of " + tally.read() + " events", "written " + out));
    }

    private EventTally toStream(ListFile list, CoincidenceSheaves sheaves, boolean text) throws IOException {
        EventTally tally = new EventTally();
        AtomicFile.write(out, common().replace(), temporary -> {
            try (OutputStream stream = new BufferedOutputStream(Files.newOutputStream(temporary), 1 << 20)) {
                if (text) {
                    stream.write((String.join(",", COLUMNS) + "\n").getBytes(StandardCharsets.US_ASCII));
                }
                each(list, sheaves, tally, rays -> stream.write(text ? csv(rays) : floats(rays)));
            }
        });
        return tally;
    }

    private EventTally toHdf5(ListFile list, CoincidenceSheaves sheaves) throws IOException {
        EventTally tally = new EventTally();
        try (Hdf5Writer file = Hdf5Writer.create(out, common().replace())) {
            List<ColumnWriter> columns = new ArrayList<>();
            for (String column : COLUMNS) {
                ColumnWriter writer = file.root().column(column, ElementType.FLOAT32, BLOCK, Compression.NONE);
                writer.attribute("unit", "mm");
                columns.add(writer);
            }
            each(list, sheaves, tally, rays -> {
                float[] values = new float[rays.size()];
                for (int c = 0; c < COLUMNS.length; c++) {
                    for (int i = 0; i < values.length; i++) {
                        values[i] = rays.rays()[6 * i + c];
                    }
                    columns.get(c).append(values, 0, values.length);
                }
            });
            file.commit();
        }
        return tally;
    }

    private void each(ListFile list, CoincidenceSheaves sheaves, EventTally tally, Target target) throws IOException {
        Set<Attribute> columns = new HashSet<>(sheaves.alsoReads());
        columns.retainAll(list.attributes());
        columns.addAll(sheaves.attributes());
        EventBlock block = new EventBlock(columns, BLOCK);
        SheafBundle rays = new SheafBundle(1, BLOCK);
        Progress progress = common().progress();
        progress.begin("writing lines", list.events(), "events");
        try (EventSource.Cursor cursor = list.open()) {
            while (cursor.next(block)) {
                rays.clear();
                sheaves.make(block, rays, tally);
                target.accept(rays);
                progress.advance(block.size());
            }
        }
        progress.end("");
    }

    private static byte[] csv(SheafBundle rays) {
        StringBuilder text = new StringBuilder();
        for (int i = 0; i < 6 * rays.size(); i++) {
            text.append(rays.rays()[i]).append(i % 6 == 5 ? '\n' : ',');
        }
        return text.toString().getBytes(StandardCharsets.US_ASCII);
    }

    private static byte[] floats(SheafBundle rays) {
        ByteBuffer bytes = ByteBuffer.allocate(6 * Float.BYTES * rays.size()).order(ByteOrder.LITTLE_ENDIAN);
        bytes.asFloatBuffer().put(rays.rays(), 0, 6 * rays.size());
        return bytes.array();
    }
}
