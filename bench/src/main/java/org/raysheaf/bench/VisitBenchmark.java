package org.raysheaf.bench;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.concurrent.ForkJoinPool;
import java.util.concurrent.TimeUnit;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.BenchmarkMode;
import org.openjdk.jmh.annotations.Fork;
import org.openjdk.jmh.annotations.Measurement;
import org.openjdk.jmh.annotations.Mode;
import org.openjdk.jmh.annotations.OutputTimeUnit;
import org.openjdk.jmh.annotations.Param;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;
import org.openjdk.jmh.annotations.Warmup;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.Joseph;
import org.raysheaf.engine.ray.Lattice;
import org.raysheaf.engine.ray.Walks;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.sheaf.SheafBundle;

/** Visits of events by one thread: forward, reciprocal, back. In the engine's order, and, as a baseline, in the order of the list. */
@State(Scope.Benchmark)
@BenchmarkMode(Mode.AverageTime)
@OutputTimeUnit(TimeUnit.MILLISECONDS)
@Fork(value = 1, jvmArgsAppend = "-XX:+UseTransparentHugePages")
@Warmup(iterations = 3)
@Measurement(iterations = 5)
public class VisitBenchmark {
    /** Events in the list; an operation visits all of them. */
    @Param("200000")
    public int events;

    /** Voxels along x and y; z has half as many more. */
    @Param({"64", "128"})
    public int voxels;

    private Walks sorted;
    private Walks listed;
    private float[] image;
    private float[] accumulator;

    /** For JMH. */
    @SuppressWarnings("NullAway.Init") // JMH calls prepare() before anything else
    public VisitBenchmark() {}

    /**
     * Makes the lines and both orders of them.
     *
     * @throws IOException if there is no room for a temporary file
     */
    @Setup
    public void prepare() throws IOException {
        Grid grid = Grid.centred(voxels, voxels, voxels * 3 / 2, 64.0 / voxels);
        Lattice lattice = new Lattice(grid);
        image = lattice.fromImage(Image.filled(grid, 1));
        accumulator = new float[lattice.size()];
        Path file = Files.createTempFile("raysheaf-bench", ".f32");
        new RingLines(42, 62).write(file, events, 1);
        LineFile list = LineFile.open(file);
        Files.delete(file);
        ForkJoinPool pool = new ForkJoinPool(1);
        EventLoader.load(
                        list,
                        list,
                        Image.filled(grid, 1),
                        EventSelection.ALL,
                        1,
                        EventBackground.NONE,
                        pool,
                        Progress.SILENT)
                .each(0, events, page -> sorted = page.walks());
        pool.shutdown();
        listed = listed(list, lattice);
    }

    private Walks listed(LineFile list, Lattice lattice) {
        EventBlock block = new EventBlock(list.attributes(), events);
        for (int event = 0; event < events; event++) {
            block.ints(Attribute.ELEMENT_A)[event] = event;
        }
        block.resize(events);
        SheafBundle bundle = new SheafBundle(1, events);
        list.make(block, bundle, new EventTally());
        Walks walks = new Walks(lattice, events);
        for (int event = 0; event < events; event++) {
            walks.set(event, bundle.rays(), event, 1);
        }
        return walks;
    }

    /**
     * Events in the engine's order.
     *
     * @return the last line integral
     */
    @Benchmark
    public float engineOrder() {
        return visit(sorted);
    }

    /**
     * Events in the order of the list.
     *
     * @return the last line integral
     */
    @Benchmark
    public float listOrder() {
        return visit(listed);
    }

    private float visit(Walks walks) {
        Joseph joseph = new Joseph(walks.lattice());
        float mean = 0;
        for (int k = 0; k < walks.capacity(); k++) {
            joseph.aim(walks, k);
            mean = joseph.forward(image);
            joseph.back(1 / mean, accumulator);
        }
        return mean;
    }
}
