package org.raysheaf.io.records;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.math.BigInteger;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Layouts drawn at random, against records made as one large whole number: the definition of how bits are counted. */
class RandomLayoutTest {
    private static final int LAYOUTS = 400;
    private static final List<BinaryFormat.Coding> CODINGS = List.of(BinaryFormat.Coding.values());

    @TempDir
    Path folder;

    /** A field of a drawn layout. */
    private record Drawn(BinaryFormat.Field field, int low, int bits, boolean big) {}

    @Test
    void everyFieldOfEveryLayoutComesBackBitForBit() throws IOException {
        for (int seed = 0; seed < LAYOUTS; seed++) {
            check(seed);
        }
    }

    private void check(int seed) throws IOException {
        SplittableRandom random = new SplittableRandom(seed);
        int bytes = 1 + random.nextInt(seed % 4 == 0 ? 100 : 24);
        BinaryFormat.Order order = random.nextBoolean() ? BinaryFormat.Order.BIG : BinaryFormat.Order.LITTLE;
        boolean big = order == BinaryFormat.Order.BIG;
        List<Drawn> fields = new ArrayList<>();
        int free = 0; // bits below are taken, so that fields do not overlap
        while (fields.size() < 12) {
            int low = free + random.nextInt(5) * random.nextInt(4);
            int bits = 1 + random.nextInt(64);
            BinaryFormat.Coding coding = CODINGS.get(random.nextInt(3));
            if (coding == BinaryFormat.Coding.FLOAT) {
                bits = random.nextBoolean() ? 32 : 64;
            }
            if (low + bits > 8 * bytes) {
                break;
            }
            fields.add(new Drawn(field(random, "f" + fields.size(), coding, low, bits, bytes, big), low, bits, big));
            free = low + bits;
        }
        if (fields.isEmpty()) {
            return;
        }
        int records = 1 + random.nextInt(300);
        int header = random.nextInt(50);
        byte[] file = new byte[header + bytes * records];
        random.nextBytes(file);
        BinaryFormat format = new BinaryFormat(
                header,
                order,
                List.of(new BinaryFormat.RecordType(
                        "event",
                        bytes,
                        BinaryFormat.Role.EVENT,
                        List.of(),
                        null,
                        fields.stream().map(Drawn::field).toList())));
        Path path = Files.write(folder.resolve("layout.bin"), file);
        DamageLog damage = new DamageLog(new DamagePolicy(DamagePolicy.Policy.STOP, 0, null));
        try (BinaryReader reader = new BinaryReader(format, damage, new Reasons())) {
            reader.open(path);
            int done = 0;
            while (reader.next(1 + random.nextInt(FieldBlock.CAPACITY))) {
                FieldBlock block = reader.block();
                for (int i = 0; i < block.size(); i++) {
                    BigInteger record = number(file, header + bytes * (done + i), bytes, big);
                    for (int f = 0; f < fields.size(); f++) {
                        compare(seed, block.fields().get(f), i, fields.get(f), record);
                    }
                }
                done += block.size();
            }
            assertThat(done).as("seed %d", seed).isEqualTo(records);
            assertThat(reader.position()).isEqualTo(file.length);
        }
    }

    /** Now by bits of the record, now by a word with or without bits of its own. */
    private static BinaryFormat.Field field(
            SplittableRandom random,
            String name,
            BinaryFormat.Coding coding,
            int low,
            int bits,
            int bytes,
            boolean big) {
        if (random.nextBoolean()) {
            return new BinaryFormat.Field(name, coding, null, null, low, bits, null);
        }
        int firstByte = low / 8;
        int lastByte = (low + bits - 1) / 8;
        int word = lastByte - firstByte + 1;
        int at = big ? bytes - 1 - lastByte : firstByte;
        boolean whole = low % 8 == 0 && bits == 8 * word;
        return whole
                ? new BinaryFormat.Field(name, coding, at, word, null, null, null)
                : new BinaryFormat.Field(name, coding, at, word, low % 8, bits, null);
    }

    private static BigInteger number(byte[] file, int start, int bytes, boolean big) {
        byte[] magnitude = new byte[bytes];
        for (int i = 0; i < bytes; i++) {
            magnitude[i] = file[start + (big ? i : bytes - 1 - i)];
        }
        return new BigInteger(1, magnitude);
    }

    private static void compare(int seed, Column column, int row, Drawn drawn, BigInteger record) {
        BigInteger bits = record.shiftRight(drawn.low())
                .and(BigInteger.ONE.shiftLeft(drawn.bits()).subtract(BigInteger.ONE));
        if (drawn.field().type() == BinaryFormat.Coding.SIGNED && bits.testBit(drawn.bits() - 1)) {
            bits = bits.subtract(BigInteger.ONE.shiftLeft(drawn.bits()));
        }
        long expected = bits.longValue();
        String place = "seed " + seed + ", " + drawn;
        if (drawn.field().type() != BinaryFormat.Coding.FLOAT) {
            assertThat(column.longs()[row]).as(place).isEqualTo(expected);
        } else if (drawn.bits() == 64) {
            double value = Double.longBitsToDouble(expected);
            assertThat(Double.doubleToLongBits(column.doubles()[row]))
                    .as(place)
                    .isEqualTo(Double.doubleToLongBits(value));
        } else {
            double value = Float.intBitsToFloat((int) expected);
            assertThat(Double.doubleToLongBits(column.doubles()[row]))
                    .as(place)
                    .isEqualTo(Double.doubleToLongBits(value));
        }
    }
}
