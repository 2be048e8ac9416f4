package org.raysheaf.io.records;

import java.io.IOException;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.frame.Vector3;

/**
 * The flat program between the fields of a record and the values that are wanted of it: steps of {@code compute} and rules of {@code set_aside}, in
 * the order of the description, as far as something wanted depends on them. One thread.
 */
final class Pipeline implements Formula.Program {
    private final Surroundings surroundings;
    private final Reasons reasons;
    private final Map<String, Column> values = new LinkedHashMap<>();
    private final List<Op> program = new ArrayList<>();
    private final Map<String, ClockUnwrap> clocks = new LinkedHashMap<>();
    private final Set<String> needed;
    private final Column fileNumber = Column.of("file", true);
    private final Column recordNumber = Column.of("record", true);

    /**
     * Compiles the program.
     *
     * @param description the description
     * @param fields columns of the format's fields
     * @param wanted formulas for the values that are wanted
     * @param surroundings tables, maps and the system
     * @param reasons numbers the reasons to set records aside
     * @param lenient whether rules of {@code set_aside} that nothing wanted depends on are left out
     * @throws RecordException if a formula cannot be understood, or a table lacks what is asked of it
     * @throws IOException if a file cannot be read
     */
    Pipeline(
            RecordsDescription description,
            List<Column> fields,
            List<String> wanted,
            Surroundings surroundings,
            Reasons reasons,
            boolean lenient)
            throws IOException {
        this.surroundings = surroundings;
        this.reasons = reasons;
        this.needed = needed(description, wanted, lenient);
        values.put("file", fileNumber);
        values.put("record", recordNumber);
        for (Column field : fields) {
            values.put(field.name(), field);
        }
        List<Exclusion> pending = new ArrayList<>(description.setAside());
        applyExclusions(pending);
        for (Map.Entry<String, FieldStep> step : description.compute().entrySet()) {
            if (needed.contains(step.getKey())) {
                compile(step.getKey(), step.getValue());
                applyExclusions(pending);
            }
        }
        if (!lenient && !pending.isEmpty()) {
            compile(pending.get(0)); // names what it lacks
        }
    }

    private static Set<String> needed(RecordsDescription description, List<String> wanted, boolean lenient) {
        Set<String> needed = new LinkedHashSet<>();
        wanted.forEach(formula -> needed.addAll(Formula.names(formula)));
        if (!lenient) {
            description.setAside().forEach(rule -> needed.addAll(Formula.names(formulaOf(rule))));
        }
        List<String> steps = new ArrayList<>(description.compute().keySet());
        for (int i = steps.size() - 1; i >= 0; i--) {
            FieldStep step = description.compute().get(steps.get(i));
            if (needed.contains(steps.get(i)) && step != null) {
                step.inputs().forEach(formula -> needed.addAll(Formula.names(formula)));
            }
        }
        return needed;
    }

    private static String formulaOf(Exclusion rule) {
        String when = rule.when();
        return when == null ? String.valueOf(rule.value()) : when;
    }

    private void applyExclusions(List<Exclusion> pending) throws IOException {
        for (Exclusion rule : List.copyOf(pending)) {
            boolean ready =
                    Formula.names(formulaOf(rule)).stream().allMatch(name -> values.containsKey(name) || isWord(name));
            if (ready) {
                compile(rule);
                pending.remove(rule);
            }
        }
    }

    private static boolean isWord(String name) {
        return Set.of("and", "or", "not", "abs", "min", "max", "sqrt", "exp", "log", "floor", "round", "if", "bits")
                .contains(name);
    }

    private void compile(Exclusion rule) throws IOException {
        String place = "set_aside, " + rule.reason();
        int reason = reasons.number(rule.reason());
        if (rule.when() != null) {
            long[] condition = Loops.truth(this, formula(place, rule.when())).longs();
            add((size, fates) -> {
                for (int i = 0; i < size; i++) {
                    fates[i] = fates[i] == 0 && condition[i] != 0 ? reason : fates[i];
                }
            });
            return;
        }
        Column value = formula(place, String.valueOf(rule.value()));
        double[] numbers = Loops.real(this, value).doubles();
        TableFile table = rule.file() == null ? null : table(place, rule.file());
        double[] listed = rule.in().stream().mapToDouble(Long::doubleValue).toArray();
        add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                if (fates[i] == 0 && isListed(numbers[i], listed, table)) {
                    fates[i] = reason;
                }
            }
        });
    }

    private static boolean isListed(double value, double[] listed, @Nullable TableFile table) {
        for (double candidate : listed) {
            if (value == candidate) {
                return true;
            }
        }
        return table != null && value == (long) value && table.row((long) value) >= 0;
    }

    /** Compiles a formula whose place is named in messages. */
    Column formula(String place, String text) throws RecordException {
        try {
            return Formula.compile(text, this);
        } catch (IllegalArgumentException e) {
            throw new RecordException(surroundings.description() + ", " + place + ": " + e.getMessage(), e);
        }
    }

    /** Compiles a formula to whole numbers; records for which it is none are set aside. */
    Column wholeFormula(String place, String text) throws RecordException {
        Column column = formula(place, text);
        if (column.whole()) {
            return column;
        }
        double[] from = column.doubles();
        Column result = temporary(true);
        long[] to = result.longs();
        int reason = reason(place + ": not a whole number");
        add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                to[i] = (long) from[i];
                if (to[i] != from[i] && fates[i] == 0) { // also if it is NaN
                    fates[i] = reason;
                }
            }
        });
        return result;
    }

    private TableFile table(String place, String name) throws IOException {
        try {
            return surroundings.table(name);
        } catch (RecordException e) {
            throw new RecordException(surroundings.description() + ", " + place + ": " + e.getMessage(), e);
        }
    }

    private void compile(String name, FieldStep step) throws IOException {
        String place = "compute." + name;
        if (values.containsKey(name)) {
            throw new RecordException(surroundings.description() + ", " + place
                    + ": expected a name of its own, found that of another value");
        }
        Column result;
        if (step instanceof FieldStep.FormulaStep s) {
            result = formula(place, s.is());
        } else if (step instanceof FieldStep.TableStep s) {
            TableFile table = table(place, s.file());
            result = lookUp(place, s.file(), table, s.key(), table.column(s.column()));
        } else if (step instanceof FieldStep.EnergyStep s) {
            result = energy(place, s);
        } else if (step instanceof FieldStep.MapStep s) {
            result = map(place, s);
        } else if (step instanceof FieldStep.ClockStep s) {
            result = clock(place, name, s);
        } else if (step instanceof FieldStep.ElementAtStep s) {
            result = elementAt(place, s);
        } else {
            FieldStep.NearestElementStep s = (FieldStep.NearestElementStep) step;
            TableFile table = table(place, s.file());
            result = lookUp(place, s.file(), table, s.key(), nearestElements(place, s, table));
        }
        values.put(name, result);
    }

    private Column lookUp(String place, String file, TableFile table, String keyFormula, double[] results)
            throws RecordException {
        long[] keys = wholeFormula(place, keyFormula).longs();
        boolean whole = TableFile.whole(results);
        Column result = temporary(whole);
        int missing = reason(place + ": no entry in " + file);
        if (whole) {
            long[] to = result.longs();
            add((size, fates) -> {
                for (int i = 0; i < size; i++) {
                    int row = table.row(keys[i]);
                    if (row < 0 || Double.isNaN(results[row])) {
                        fates[i] = fates[i] == 0 ? missing : fates[i];
                    } else {
                        to[i] = (long) results[row];
                    }
                }
            });
        } else {
            double[] to = result.doubles();
            add((size, fates) -> {
                for (int i = 0; i < size; i++) {
                    int row = table.row(keys[i]);
                    to[i] = row < 0 ? Double.NaN : results[row];
                    if (Double.isNaN(to[i]) && fates[i] == 0) {
                        fates[i] = missing;
                    }
                }
            });
        }
        return result;
    }

    private Column energy(String place, FieldStep.EnergyStep step) throws IOException {
        TableFile table = table(place, step.file());
        double[] gain = table.column("gain_keV");
        double[] offset = table.has("offset_keV") ? table.column("offset_keV") : new double[gain.length];
        double[] quadratic = table.has("quadratic_keV") ? table.column("quadratic_keV") : new double[gain.length];
        long[] keys = wholeFormula(place, step.key()).longs();
        double[] x = Loops.real(this, formula(place, step.of())).doubles();
        Column result = temporary(false);
        double[] to = result.doubles();
        int missing = reason(place + ": no calibration in " + step.file());
        add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                int row = table.row(keys[i]);
                to[i] = row < 0 ? Double.NaN : offset[row] + x[i] * (gain[row] + x[i] * quadratic[row]);
                if (Double.isNaN(to[i]) && fates[i] == 0) {
                    fates[i] = missing;
                }
            }
        });
        return result;
    }

    private Column map(String place, FieldStep.MapStep step) throws IOException {
        CrystalMap map;
        try {
            map = surroundings.map(step.file());
        } catch (RecordException e) {
            throw new RecordException(surroundings.description() + ", " + place + ": " + e.getMessage(), e);
        }
        double[] x = Loops.real(this, formula(place, step.x())).doubles();
        double[] y = Loops.real(this, formula(place, step.y())).doubles();
        long[] page = step.page() == null
                ? new long[FieldBlock.CAPACITY]
                : wholeFormula(place, step.page()).longs();
        double width = step.xTo() - step.xFrom();
        double height = step.yTo() - step.yFrom();
        Column result = temporary(true);
        long[] to = result.longs();
        int outside = reason(place + ": position in no crystal");
        add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                to[i] = map.at(page[i], (x[i] - step.xFrom()) / width, (y[i] - step.yFrom()) / height);
                if (to[i] < 0 && fates[i] == 0) {
                    fates[i] = outside;
                }
            }
        });
        return result;
    }

    private Column clock(String place, String name, FieldStep.ClockStep step) throws RecordException {
        Column of = wholeFormula(place, step.of());
        Column per = step.per() == null ? null : wholeFormula(place, step.per());
        Column result = temporary(true);
        ClockUnwrap clock = new ClockUnwrap(
                step,
                of,
                per,
                result,
                reason(place + ": count beyond the range of the clock"),
                reason(place + ": per outside 0 to 65535"));
        add(clock);
        clocks.put(name, clock);
        return result;
    }

    private Column elementAt(String place, FieldStep.ElementAtStep step) throws RecordException {
        double[] x = Loops.real(this, formula(place, step.xMm())).doubles();
        double[] y = Loops.real(this, formula(place, step.yMm())).doubles();
        double[] z = Loops.real(this, formula(place, step.zMm())).doubles();
        DetectorSystem system = surroundings.system();
        Column result = temporary(true);
        long[] to = result.longs();
        int outside = reason(place + ": point in no element");
        add((size, fates) -> {
            for (int i = 0; i < size; i++) {
                if (fates[i] == 0) {
                    boolean finite = Double.isFinite(x[i]) && Double.isFinite(y[i]) && Double.isFinite(z[i]);
                    to[i] = finite ? system.elementAt(new Vector3(x[i], y[i], z[i])) : -1;
                    fates[i] = to[i] < 0 ? outside : 0;
                }
            }
        });
        return result;
    }

    private double[] nearestElements(String place, FieldStep.NearestElementStep step, TableFile table)
            throws RecordException {
        double[] x = table.column("x_mm");
        double[] y = table.column("y_mm");
        double[] z = table.column("z_mm");
        DetectorSystem system = surroundings.system();
        Vector3[] centres = new Vector3[system.elements()];
        for (int e = 0; e < centres.length; e++) {
            centres[e] = system.centre(e);
        }
        double[] elements = new double[table.rows()];
        for (int r = 0; r < elements.length; r++) {
            double nearest = Double.POSITIVE_INFINITY;
            for (int e = 0; e < centres.length; e++) {
                double dx = centres[e].x() - x[r];
                double dy = centres[e].y() - y[r];
                double dz = centres[e].z() - z[r];
                double square = dx * dx + dy * dy + dz * dz;
                if (square < nearest) {
                    nearest = square;
                    elements[r] = e;
                }
            }
            if (!(Math.sqrt(nearest) <= step.withinMm())) { // also if a coordinate is missing
                throw new RecordException(surroundings.description() + ", " + place + ": expected an element within "
                        + step.withinMm() + " mm of (" + x[r] + ", " + y[r] + ", " + z[r] + ") mm, "
                        + table.keyName() + " " + table.key(r) + " of " + step.file() + ", found the nearest at "
                        + Math.sqrt(nearest) + " mm; check axes and units of the table");
            }
        }
        return elements;
    }

    /** Runs the program on a block. */
    void run(FieldBlock block, int file) {
        int size = block.size();
        for (int i = 0; i < size; i++) {
            fileNumber.longs()[i] = file;
            recordNumber.longs()[i] = block.first() + i;
        }
        for (Op op : program) {
            op.run(size, block.fates());
        }
    }

    /** Names that something wanted depends on. */
    Set<String> neededNames() {
        return needed;
    }

    /** Clocks by the names of their steps. */
    Map<String, ClockUnwrap> clocks() {
        return clocks;
    }

    @Override
    public @Nullable Column named(String name) {
        return values.get(name);
    }

    @Override
    public Set<String> names() {
        return values.keySet();
    }

    @Override
    public Column temporary(boolean whole) {
        return Column.of("", whole);
    }

    @Override
    public void add(Op op) {
        program.add(op);
    }

    @Override
    public int reason(String words) {
        return reasons.number(words);
    }
}
