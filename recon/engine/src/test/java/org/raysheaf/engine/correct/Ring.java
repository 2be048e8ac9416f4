package org.raysheaf.engine.correct;

import java.io.IOException;
import java.time.Instant;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.FieldOfView;
import org.raysheaf.geometry.detector.PairRule;
import org.raysheaf.geometry.detector.Placement;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.detector.SystemDescription;
import org.raysheaf.geometry.event.Attribute;
import org.raysheaf.geometry.event.EventBlock;
import org.raysheaf.geometry.event.EventSource;
import org.raysheaf.geometry.event.ListHeader;
import org.raysheaf.geometry.event.PairingRecord;
import org.raysheaf.geometry.frame.Vector3;
import org.raysheaf.geometry.matter.Material;
import org.raysheaf.geometry.phantom.Phantom;
import org.raysheaf.geometry.phantom.PhantomDescription;
import org.raysheaf.geometry.phantom.PhantomPart;
import org.raysheaf.geometry.response.ElementResponse;
import org.raysheaf.geometry.response.WindowShares;
import org.raysheaf.geometry.solid.Cylinder;

/** A small ring of absorbing faces, a water cylinder in it, and lists made of nothing but pairs. */
final class Ring {
    static final DetectorSystem SYSTEM = new DetectorSystem(new SystemDescription(
            "ring",
            new FieldOfView(25, 30),
            new PairRule(2),
            List.of(new Material("black", 0)),
            List.of(new CrystalBlock(
                    "block",
                    5,
                    5,
                    1,
                    new Vector3(5, 5, 1),
                    new Vector3(4.5, 4.5, 1),
                    "black",
                    new Readout(
                            Readout.Channel.BLOCK,
                            Readout.Decoding.LARGEST,
                            0,
                            null,
                            0,
                            0.5,
                            0,
                            60,
                            1,
                            100,
                            100,
                            Readout.DeadTime.NON_PARALYSABLE,
                            0,
                            null,
                            false))),
            List.of(new Placement.Rings("block", 8, 40, 0, List.of(0.0)))));

    static final ElementResponse FACES = ElementResponse.ofFaces(SYSTEM);

    private Ring() {}

    /** Everything of 511 keV passes the window, half of it at 400 keV, nothing below 350 keV. */
    static WindowShares window() {
        double[] shape = new double[WindowShares.SHAPE * WindowShares.SHAPE];
        Arrays.fill(shape, 1);
        double[] factors = new double[FACES.classes()];
        Arrays.fill(factors, 1);
        return new WindowShares(
                0, 0.5, shape, factors, new double[] {350, 400, 511}, new double[] {0, 0.5, 1}, 1, 0.01);
    }

    static Phantom water(double radiusMm, double lengthMm, double kBqPerMl) {
        return new Phantom(new PhantomDescription(
                "water",
                List.of(new PhantomPart(
                        "water", new Cylinder(radiusMm, lengthMm), Vector3.ZERO, Vector3.ZERO, "water", kBqPerMl))));
    }

    /** A list of pairs of elements; delayed where told so. */
    static final class Pairs implements EventSource {
        private final List<int[]> rows = new ArrayList<>();
        private final @Nullable PairingRecord pairing;

        Pairs(@Nullable PairingRecord pairing) {
            this.pairing = pairing;
        }

        void add(int a, int b, boolean delayed) {
            rows.add(new int[] {a, b, delayed ? 1 : 0});
        }

        @Override
        public ListHeader header() {
            return new ListHeader("", 100, 81, Instant.EPOCH, null, pairing);
        }

        @Override
        public Set<Attribute> attributes() {
            return EnumSet.of(Attribute.ELEMENT_A, Attribute.ELEMENT_B, Attribute.DELAYED);
        }

        @Override
        public long events() {
            return rows.size();
        }

        @Override
        public Cursor open() {
            return new Cursor() {
                private int next;

                @Override
                public boolean next(EventBlock block) throws IOException {
                    block.resize(0);
                    while (next < rows.size() && block.size() < block.capacity()) {
                        int i = block.size();
                        block.resize(i + 1);
                        block.ints(Attribute.ELEMENT_A)[i] = rows.get(next)[0];
                        block.ints(Attribute.ELEMENT_B)[i] = rows.get(next)[1];
                        if (block.has(Attribute.DELAYED)) {
                            block.bytes(Attribute.DELAYED)[i] = (byte) rows.get(next)[2];
                        }
                        next++;
                    }
                    return block.size() > 0;
                }

                @Override
                public void close() {
                    // nothing is open
                }
            };
        }
    }
}
