package org.raysheaf.engine;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.time.Instant;
import java.util.EnumSet;
import java.util.Set;
import java.util.SplittableRandom;
import java.util.concurrent.ForkJoinPool;
import org.junit.jupiter.api.Tag;
import org.junit.jupiter.api.Test;
import org.raysheaf.engine.ray.EventBackground;
import org.raysheaf.engine.ray.EventLoader;
import org.raysheaf.engine.ray.EventSelection;
import org.raysheaf.engine.ray.EventStore;
import org.raysheaf.engine.ray.Joseph;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.EventTally;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.frame.Grid;
import org.raysheaf.geometry.frame.Image;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.geometry.sheaf.SheafBundle;
import org.raysheaf.geometry.sheaf.SheafMaker;

/**
 * What times of flight are worth in the middle of a large uniform disk: variance falls by D / (2 √π σ) (Tomitani 1981; reference-values
 * G5), which is D · ∫ g², the gain in information on detail much finer than the density g.
 */
final class TimesOfFlightGainTest {
    private static final double DISK_MM = 200;
    private static final double SD_MM = 12;
    private static final double GAIN = DISK_MM / (2 * Math.sqrt(Math.PI) * SD_MM);
    private static final Grid GRID = Grid.centred(54, 54, 1, 4);
    private static final ForkJoinPool POOL = ForkJoinPool.commonPool();

    /** Decays in a plane, uniform in a disk or all at one point, seen by a ring without gaps. */
    private record Disk(int decays, long seed, double radiusMm, boolean timed) implements EventSource, SheafMaker {
        @Override
        public ListHeader header() {
            return new ListHeader("", 1, 1, Instant.EPOCH, null);
        }

        @Override
        public Set<Attribute> attributes() {
            return EnumSet.of(Attribute.ELEMENT_A);
        }

        @Override
        public long events() {
            return decays;
        }

        @Override
        public Cursor open() {
            return new Cursor() {
                private int next;

                @Override
                public boolean next(EventBlock block) {
                    int size = Math.min(block.capacity(), decays - next);
                    for (int i = 0; i < size; i++) {
                        block.ints(Attribute.ELEMENT_A)[i] = next++;
                    }
                    block.resize(size);
                    return size > 0;
                }

                @Override
                public void close() {}
            };
        }

        @Override
        public int raysPerSheaf() {
            return 1;
        }

        @Override
        public SheafBundle.WeightLaw law() {
            return timed ? SheafBundle.WeightLaw.GAUSSIAN : SheafBundle.WeightLaw.PLAIN;
        }

        @Override
        public void make(EventBlock events, SheafBundle out, EventTally tally) {
            for (int i = 0; i < events.size(); i++) {
                SplittableRandom random =
                        new SplittableRandom(seed * 100_000_007L + events.ints(Attribute.ELEMENT_A)[i]);
                double r = radiusMm * Math.sqrt(random.nextDouble());
                double turn = 2 * Math.PI * random.nextDouble();
                double angle = 2 * Math.PI * random.nextDouble();
                double dx = 400 * Math.cos(angle);
                double dy = 400 * Math.sin(angle);
                double x = r * Math.cos(turn);
                double y = r * Math.sin(turn);
                int ray = out.append();
                out.set(ray, x - dx, y - dy, 0, x + dx, y + dy, 0, 1);
                if (timed) {
                    double normal = Math.sqrt(-2 * Math.log(1 - random.nextDouble()))
                            * Math.cos(2 * Math.PI * random.nextDouble());
                    out.place(ray, 400 + SD_MM * normal, SD_MM);
                }
                tally.use();
            }
        }
    }

    private static EventStore load(Disk disk) throws IOException {
        Image support = FieldOfView.support(Image.filled(GRID, 1), FieldOfView.cylinder(DISK_MM / 2));
        return EventLoader.load(
                disk, disk, support, EventSelection.ALL, 1, EventBackground.NONE, POOL, Progress.SILENT);
    }

    /** Σ over events of (a_ej / q_e)², with q of the true uniform disk, over the voxels j around the middle (reference-values G10). */
    private static double information(boolean timed) throws IOException {
        EventStore store = load(new Disk(200_000, 1, DISK_MM / 2, timed));
        float[] disk = store.support();
        double[] sum = new double[1];
        store.each(0, store.events(), page -> {
            Joseph joseph = new Joseph(store.lattice());
            float[] row = new float[store.lattice().size()];
            float[] middle = store.lattice().fromImage(middle());
            for (int k = page.first(); k < page.end(); k++) {
                joseph.aim(page.walks(), k);
                float part = joseph.forward(middle);
                if (part > 0) {
                    double q = joseph.forward(disk);
                    java.util.Arrays.fill(row, 0);
                    joseph.back(1, row);
                    for (int j = 0; j < row.length; j++) {
                        sum[0] += middle[j] * (row[j] / q) * (row[j] / q);
                    }
                }
            }
        });
        return sum[0];
    }

    private static Image middle() {
        Image middle = new Image(GRID);
        for (int x = 25; x <= 28; x++) {
            for (int y = 25; y <= 28; y++) {
                middle.values()[GRID.index(x, y, 0)] = 1;
            }
        }
        return middle;
    }

    @Test
    void informationOnFineDetailGrowsAsThePublicationSays() throws IOException {
        // some 30,000 events cross the middle, 5,000 of them with times that put them there: 2 % statistics
        assertThat(information(true) / information(false)).isCloseTo(GAIN, within(0.06 * GAIN));
    }

    /** One point, few passes: the image with times is narrower, and as narrow in all directions. */
    @Test
    void aPointIsSharperWithTimes() throws IOException {
        double[] widths = new double[2];
        for (int i = 0; i < 2; i++) {
            EventStore store = load(new Disk(20_000, 2, 0.5, i == 1));
            Image image = new Estimator(store, Image.filled(GRID, 1), EstimationSettings.mlem(1), POOL)
                    .run(PassListener.SILENT, Progress.SILENT)
                    .image();
            double sum = 0;
            for (int x = 0; x < GRID.nx(); x++) {
                for (int y = 0; y < GRID.ny(); y++) {
                    double r = Math.hypot(
                            GRID.centre(x, y, 0).x(), GRID.centre(x, y, 0).y());
                    sum += image.at(x, y, 0);
                    widths[i] += image.at(x, y, 0) * r;
                }
            }
            widths[i] /= sum;
        }
        // One pass is a back projection: without times density 1/r, so a mean radius of R/2. With times the offset is
        // blurred twice, in the event and by the back projection: |x| of a normal of √2 σ is 2σ/√π.
        assertThat(widths[0]).isCloseTo(DISK_MM / 4, within(0.05 * DISK_MM));
        assertThat(widths[1]).isCloseTo(2 * SD_MM / Math.sqrt(Math.PI), within(0.08 * SD_MM));
    }

    /** Images of independent lists, filtered alike: their scatter from list to list in the middle of the disk. */
    @Test
    @Tag("proof")
    void varianceFallsAsThePublicationSays() throws IOException {
        double[] variance = {variance(false), variance(true)};
        assertThat(variance[0] / variance[1]).isCloseTo(GAIN, within(0.15 * GAIN));
    }

    private static double variance(boolean timed) throws IOException {
        int lists = 12;
        double[] sums = new double[GRID.voxels()];
        double[] squares = new double[GRID.voxels()];
        for (int i = 0; i < lists; i++) {
            EventStore store = load(new Disk(300_000, 10 + i, DISK_MM / 2, timed));
            // plain images converge slowly, and settle at this width after some 100 passes
            EstimationSettings settings = new EstimationSettings(timed ? 60 : 200, 1, 2, 14);
            float[] image = new Estimator(store, Image.filled(GRID, 1), settings, POOL)
                    .run(PassListener.SILENT, Progress.SILENT)
                    .image()
                    .values();
            for (int j = 0; j < image.length; j++) {
                sums[j] += image[j];
                squares[j] += image[j] * (double) image[j];
            }
        }
        double sum = 0;
        for (int x = 20; x <= 33; x++) {
            for (int y = 20; y <= 33; y++) {
                int j = GRID.index(x, y, 0);
                sum += (squares[j] - sums[j] * sums[j] / lists) / (lists - 1);
            }
        }
        return sum;
    }
}
