package org.raysheaf.io.records;

import java.io.IOException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.TreeMap;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.port.Progress;
import org.raysheaf.io.overview.Photopeak;
import org.raysheaf.io.overview.Spectrum;

/**
 * Calibrates channels from the records themselves, without any calibration before: the photopeak of every channel gives its gain, the time differences of
 * pairs give its offset. The description's section {@code calibration} says which values to look at; only the steps that these depend on are run.
 *
 * <p>Gains: {@link Photopeak} of the channel's amplitudes, {@code gain = peak_keV / position}. Offsets: {@link OffsetSolver} over all pairs within a window;
 * the data are read {@value #PASSES} times, each time with the window drawn closer around the solution before, so that random coincidences weigh little.
 * With a point source at a known place, the difference of the flight paths is taken off first; without, the source is taken to be as near to one as to the other on
 * average. Singles of several boards are paired within each board only. Immutable.
 */
public final class RecordCalibration {
    /** Speed of light in vacuum: 0.299792458 mm/ps (exact, SI definition). */
    private static final double LIGHT_MM_PER_PS = 0.299792458;

    private static final int PASSES = 4;
    private static final int BINS = 256;
    private static final int MOST_CHANNELS = 1 << 20;
    private static final double PS_PER_NS = 1000;

    /** Of a Gaussian, half lies within 0.6745 standard deviations (from its inverse distribution function). */
    private static final double HALF_WITHIN = 0.6745;

    /** Window in standard deviations about the solution; farther out are mostly random coincidences. */
    private static final double WINDOW_SIGMAS = 4;

    private final Path path;
    private final RecordsDescription description;
    private final CalibrationInputs inputs;
    private final DetectorSystem system;

    /**
     * Prepares a calibration.
     *
     * @param path the file of the description
     * @param description the description, with a section {@code calibration}
     * @param system the system
     * @throws RecordException if the description has no section {@code calibration}
     */
    public RecordCalibration(Path path, RecordsDescription description, DetectorSystem system) throws RecordException {
        this.path = path;
        this.description = description;
        this.system = system;
        CalibrationInputs given = description.calibration();
        if (given == null) {
            throw new RecordException(
                    path + ": expected a section calibration that says which values to look at, found none; add"
                            + " for example calibration: {channel: ch, amplitude: adc}");
        }
        this.inputs = given;
    }

    /** What a channel has shown so far. */
    private static final class ChannelData {
        final long number;
        final int index;
        final Spectrum spectrum = Spectrum.oneOfMany(BINS);

        @Nullable
        Vector3 place;

        ChannelData(long number, int index) {
            this.number = number;
            this.index = index;
        }
    }

    /** The columns of the wanted values; those that are not wanted are null. */
    private record Wanted(
            Column channel,
            @Nullable Column channelB,
            @Nullable Column amplitude,
            @Nullable Column amplitudeB,
            @Nullable Column difference,
            @Nullable Column time,
            @Nullable Column element,
            @Nullable Column elementB) {}

    /** Everything that a run gathers. */
    private static final class Gathered {
        final Map<Long, ChannelData> channels = new HashMap<>();
        final List<ChannelData> byIndex = new ArrayList<>();
        final PairSums pairs = new PairSums();
        double[] offsets = new double[0];
        double windowPs;
        Spectrum residuals = new Spectrum(1, 0, 1);
        long records;
    }

    /**
     * Reads the data and calibrates.
     *
     * @param files the data files
     * @param source where a point source was (mm), or null if it is not known or was none
     * @param positions a table with channel, x_mm, y_mm, z_mm, or null to take positions from the system by the elements of the records; only with a source
     * @param progress hears of it, in bytes
     * @return the calibration
     * @throws RecordException if the description does not fit the data
     * @throws IOException if files cannot be read
     */
    public CalibrationResult run(
            List<Path> files, @Nullable Vector3 source, @Nullable Path positions, Progress progress)
            throws IOException {
        Gathered gathered = new Gathered();
        TableFile places = positions == null ? null : TableFile.read(positions);
        boolean timed = inputs.timeDifferencePs() != null || inputs.timePs() != null;
        gathered.windowPs = inputs.windowNs() * PS_PER_NS;
        int passes = timed ? PASSES : 1;
        for (int pass = 0; pass < passes; pass++) {
            gathered.pairs.clear();
            gathered.residuals = new Spectrum(2000, -gathered.windowPs, gathered.windowPs);
            progress.begin("calibrating, pass " + (pass + 1) + " of " + passes, RecordImport.bytesOf(files), "bytes");
            read(files, gathered, pass == 0, source, places, progress);
            progress.end("");
            if (timed) {
                solve(gathered);
            }
        }
        return result(gathered, timed);
    }

    private void read(
            List<Path> files,
            Gathered gathered,
            boolean first,
            @Nullable Vector3 source,
            @Nullable TableFile places,
            Progress progress)
            throws IOException {
        Reasons reasons = new Reasons();
        Surroundings surroundings = new Surroundings(path, system);
        DamageLog damage = new DamageLog(description.damage());
        boolean boards = description.files() == RecordsDescription.FileOrder.BOARDS;
        RecordReader reader = RecordImport.readerFor(description.format(), damage, reasons);
        Pipeline pipeline = null;
        Wanted wanted = null;
        try {
            for (int f = 0; f < files.size(); f++) {
                if (boards && f > 0) {
                    reader.close();
                    reader = RecordImport.readerFor(description.format(), damage, reasons);
                    pipeline = null;
                }
                reader.open(files.get(f));
                if (pipeline == null) {
                    boolean elements = source != null && places == null;
                    pipeline = new Pipeline(
                            description, reader.block().fields(), formulas(elements), surroundings, reasons, true);
                    wanted = wanted(pipeline, elements);
                }
                long told = 0;
                while (reader.next(FieldBlock.CAPACITY)) {
                    FieldBlock block = reader.block();
                    pipeline.run(block, f);
                    gathered.records += first ? block.size() : 0;
                    if (wanted != null) {
                        take(block, wanted, gathered, first, source, places);
                    }
                    progress.advance(reader.position() - told);
                    told = reader.position();
                }
            }
        } finally {
            reader.close();
        }
    }

    private List<String> formulas(boolean elements) {
        List<String> formulas = new ArrayList<>(List.of(inputs.channel()));
        for (String formula : new String[] {
            inputs.channelB(), inputs.amplitude(), inputs.amplitudeB(), inputs.timeDifferencePs(), inputs.timePs()
        }) {
            if (formula != null) {
                formulas.add(formula);
            }
        }
        for (String attribute : List.of("element", "element_a", "element_b")) {
            Mapping mapping = description.attributes().get(attribute);
            if (elements && mapping != null) {
                formulas.add(mapping.from());
            }
        }
        return formulas;
    }

    private Wanted wanted(Pipeline pipeline, boolean elements) throws RecordException {
        String elementA = inputs.channelB() == null ? "element" : "element_a";
        return new Wanted(
                pipeline.wholeFormula("calibration.channel", inputs.channel()),
                inputs.channelB() == null ? null : pipeline.wholeFormula("calibration.channel_b", inputs.channelB()),
                real(pipeline, "amplitude", inputs.amplitude()),
                real(pipeline, "amplitude_b", inputs.amplitudeB()),
                real(pipeline, "time_difference_ps", inputs.timeDifferencePs()),
                inputs.timePs() == null ? null : pipeline.wholeFormula("calibration.time_ps", inputs.timePs()),
                elements ? element(pipeline, elementA) : null,
                elements && inputs.channelB() != null ? element(pipeline, "element_b") : null);
    }

    private static @Nullable Column real(Pipeline pipeline, String name, @Nullable String formula)
            throws RecordException {
        return formula == null ? null : Loops.real(pipeline, pipeline.formula("calibration." + name, formula));
    }

    private Column element(Pipeline pipeline, String attribute) throws RecordException {
        Mapping mapping = description.attributes().get(attribute);
        if (mapping == null) {
            throw new RecordException(path + ": expected attributes." + attribute
                    + ", which tells where a channel is, found none; add it, or give a table of positions");
        }
        return pipeline.wholeFormula("attributes." + attribute, mapping.from());
    }

    private void take(
            FieldBlock block,
            Wanted wanted,
            Gathered gathered,
            boolean first,
            @Nullable Vector3 source,
            @Nullable TableFile places)
            throws RecordException {
        int[] fates = block.fates();
        ChannelData before = null;
        long timeBefore = 0;
        for (int i = 0; i < block.size(); i++) {
            if (fates[i] != 0) {
                continue;
            }
            ChannelData a = channel(gathered, wanted.channel().longs()[i]);
            ChannelData b = wanted.channelB() == null
                    ? null
                    : channel(gathered, wanted.channelB().longs()[i]);
            if (first) {
                count(a, wanted.amplitude(), i);
                count(b, wanted.amplitudeB(), i);
                if (source != null) {
                    a.place = a.place == null ? place(a, wanted.element(), i, places) : a.place;
                    if (b != null) {
                        b.place = b.place == null ? place(b, wanted.elementB(), i, places) : b.place;
                    }
                }
            }
            if (b != null && wanted.difference() != null) {
                pair(gathered, a, b, wanted.difference().doubles()[i], source);
            } else if (b == null && wanted.time() != null) {
                // Two singles that follow each other within the window count as a pair.
                long time = wanted.time().longs()[i];
                if (before != null && before != a) {
                    pair(gathered, before, a, (double) (time - timeBefore), source);
                }
                before = a;
                timeBefore = time;
            }
        }
    }

    private static void count(@Nullable ChannelData channel, @Nullable Column amplitude, int row) {
        if (channel != null && amplitude != null) {
            channel.spectrum.add(amplitude.doubles()[row]);
        }
    }

    private ChannelData channel(Gathered gathered, long number) throws RecordException {
        ChannelData data = gathered.channels.get(number);
        if (data == null) {
            if (gathered.channels.size() >= MOST_CHANNELS) {
                throw new RecordException(path + ", calibration.channel: expected at most " + MOST_CHANNELS
                        + " channels, found more; is the value a channel?");
            }
            data = new ChannelData(number, gathered.byIndex.size());
            gathered.channels.put(number, data);
            gathered.byIndex.add(data);
        }
        return data;
    }

    private @Nullable Vector3 place(ChannelData channel, @Nullable Column element, int row, @Nullable TableFile places)
            throws RecordException {
        if (places != null) {
            int at = places.row(channel.number);
            return at < 0
                    ? null
                    : new Vector3(places.column("x_mm")[at], places.column("y_mm")[at], places.column("z_mm")[at]);
        }
        long e = element == null ? -1 : element.longs()[row];
        return e < 0 || e >= system.elements() ? null : system.centre((int) e);
    }

    private static void pair(
            Gathered gathered, ChannelData a, ChannelData b, double difference, @Nullable Vector3 source) {
        double known = 0;
        if (source != null) {
            if (a.place == null || b.place == null) {
                return;
            }
            known = (b.place.minus(source).norm() - a.place.minus(source).norm()) / LIGHT_MM_PER_PS;
        }
        double own = difference - known;
        double residual = own - (offset(gathered, b) - offset(gathered, a));
        if (a != b && Math.abs(residual) <= gathered.windowPs) { // not if it is NaN
            gathered.pairs.add(a.index, b.index, own);
            gathered.residuals.add(residual);
        }
    }

    private static double offset(Gathered gathered, ChannelData channel) {
        double offset = channel.index < gathered.offsets.length ? gathered.offsets[channel.index] : 0;
        return Double.isNaN(offset) ? 0 : offset;
    }

    private void solve(Gathered gathered) {
        gathered.offsets = new OffsetSolver(gathered.pairs, gathered.byIndex.size()).solve();
        gathered.windowPs = Math.min(gathered.windowPs, Math.max(WINDOW_SIGMAS * spreadPs(gathered), 1));
    }

    /** Standard deviation of the residuals, from the middle half of them. */
    private static double spreadPs(Gathered gathered) {
        Spectrum residuals = gathered.residuals;
        double half = 0.5 * residuals.total();
        long inside = 0;
        int middle = (int) Math.round((residuals.median() - residuals.low()) / residuals.step());
        for (int reach = 0; reach < residuals.counts().length; reach++) {
            inside += at(residuals, middle - 1 - reach) + at(residuals, middle + reach);
            if (inside >= half) {
                return (reach + 1) * residuals.step() / HALF_WITHIN;
            }
        }
        return gathered.windowPs;
    }

    private static long at(Spectrum spectrum, int bin) {
        return bin >= 0 && bin < spectrum.counts().length ? spectrum.counts()[bin] : 0;
    }

    private CalibrationResult result(Gathered gathered, boolean timed) {
        long[] pairCounts = new long[gathered.byIndex.size()];
        gathered.pairs.forEach((a, b, count, sum) -> {
            pairCounts[a] += count;
            pairCounts[b] += count;
        });
        double spread = timed ? spreadPs(gathered) : 0;
        List<CalibrationResult.Channel> channels = new ArrayList<>();
        List<String> failures = new ArrayList<>();
        for (ChannelData data : new TreeMap<>(gathered.channels).values()) {
            Photopeak peak = null;
            if (inputs.amplitude() != null) {
                peak = data.spectrum.total() < inputs.leastCounts() ? null : Photopeak.of(data.spectrum);
                if (peak == null) {
                    failures.add(String.format(
                            Locale.ROOT,
                            "channel %d, energy: %s",
                            data.number,
                            data.spectrum.total() < inputs.leastCounts()
                                    ? "only " + data.spectrum.total() + " counts, expected " + inputs.leastCounts()
                                    : "no photopeak that a fit finds in " + data.spectrum.total() + " counts"));
                }
            }
            long pairs = pairCounts[data.index];
            double offset = timed ? gathered.offsets[data.index] : Double.NaN;
            boolean told = timed && !Double.isNaN(offset) && pairs >= inputs.leastCounts();
            if (timed && !told) {
                failures.add(String.format(
                        Locale.ROOT,
                        "channel %d, time: %s",
                        data.number,
                        pairs < inputs.leastCounts()
                                ? "only " + pairs + " pairs, expected " + inputs.leastCounts()
                                : "no pairs that connect it to the other channels"));
            }
            channels.add(new CalibrationResult.Channel(
                    data.number,
                    data.spectrum.total(),
                    peak == null ? null : inputs.peakKeV() / peak.position(),
                    peak == null ? null : inputs.peakKeV() / peak.position() * peak.positionError() / peak.position(),
                    peak == null ? null : 100 * peak.fwhm() / peak.position(),
                    pairs,
                    told ? offset : null,
                    told ? spread / Math.sqrt((double) pairs) : null));
        }
        return new CalibrationResult(
                List.copyOf(channels), List.copyOf(failures), timed ? spread : null, gathered.records);
    }
}
