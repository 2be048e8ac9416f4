package org.raysheaf.transport;

import java.util.Arrays;
import org.raysheaf.geometry.detector.CrystalBlock;
import org.raysheaf.geometry.detector.DetectorSystem;
import org.raysheaf.geometry.detector.MonolithicBlock;
import org.raysheaf.geometry.detector.PlacedBlock;
import org.raysheaf.geometry.detector.Readout;
import org.raysheaf.geometry.frame.Pose;
import org.raysheaf.geometry.frame.Vector3;

/** How every block of a system is read out: its channels, its frame, its blurs as standard deviations. Immutable. */
final class ReadoutPlan {
    private static final double FWHM_PER_SD = 2 * Math.sqrt(2 * Math.log(2));

    /** Gaussian numbers are cut at so many standard deviations, so that delays have a bound. */
    static final double CUT = 6;

    private static final double PS_PER_NS = 1000;

    private final DetectorSystem system;
    private final Block[] blocks;
    private final int[] channelOfElement;
    private final int[] blockOfChannel;

    /** One block. */
    static final class Block {
        final PlacedBlock placed;
        final CrystalBlock lattice;
        final Readout readout;
        final boolean monolithic;
        final double timeSdPs;
        final double lightSdMm;
        final Vector3 pointSdMm;
        final double depthSdMm;
        final long integrationPs;
        final long deadPs;
        final boolean paralysable;
        final double lowestKeV;
        final double highestKeV;
        private final double sdAt511;
        private final double[] axes;
        private final double[] origin;

        private Block(PlacedBlock placed) {
            this.placed = placed;
            lattice = placed.kind().lattice();
            readout = placed.kind().readout();
            monolithic = placed.kind() instanceof MonolithicBlock;
            timeSdPs = readout.timeFwhmPs() / FWHM_PER_SD;
            lightSdMm = readout.lightSpreadFwhmMm() / FWHM_PER_SD;
            pointSdMm = placed.kind() instanceof MonolithicBlock whole
                    ? whole.positionSdMm()
                    : lattice.crystalMm().times(1 / Math.sqrt(12)); // of a point anywhere in the crystal
            Double depth = readout.depthFwhmMm();
            depthSdMm = depth == null ? pointSdMm.z() : depth / FWHM_PER_SD;
            integrationPs = Math.round(PS_PER_NS * readout.integrationNs());
            deadPs = Math.max(integrationPs, Math.round(PS_PER_NS * readout.deadTimeNs()));
            paralysable = readout.deadTime() == Readout.DeadTime.PARALYSABLE;
            lowestKeV = readout.lowestKeV();
            Double highest = readout.highestKeV();
            highestKeV = highest == null ? Double.POSITIVE_INFINITY : highest;
            sdAt511 = readout.energyFwhmKeV(510.99895) / FWHM_PER_SD;
            Pose pose = placed.pose();
            axes = new double[] {
                pose.u().x(), pose.u().y(), pose.u().z(),
                pose.v().x(), pose.v().y(), pose.v().z(),
                pose.w().x(), pose.w().y(), pose.w().z()
            };
            origin = new double[] {
                pose.origin().x(), pose.origin().y(), pose.origin().z()
            };
        }

        boolean blursEnergy() {
            return sdAt511 > 0;
        }

        double energySdKeV(double energyKeV) {
            return readout.energyFwhmKeV(energyKeV) / FWHM_PER_SD;
        }

        /** One coordinate of a point in the block's frame (mm): 0, 1, 2 for u, v, w. */
        double local(int axis, double x, double y, double z) {
            return axes[3 * axis] * (x - origin[0])
                    + axes[3 * axis + 1] * (y - origin[1])
                    + axes[3 * axis + 2] * (z - origin[2]);
        }

        /** One component of a direction in the block's frame: 0, 1, 2 for u, v, w. */
        double along(int axis, double dx, double dy, double dz) {
            return axes[3 * axis] * dx + axes[3 * axis + 1] * dy + axes[3 * axis + 2] * dz;
        }

        /** One coordinate in the world of a point in the block's frame (mm). */
        double world(int axis, double u, double v, double w) {
            return origin[axis] + axes[axis] * u + axes[3 + axis] * v + axes[6 + axis] * w;
        }
    }

    ReadoutPlan(DetectorSystem system) {
        this.system = system;
        blocks = system.blocks().stream().map(Block::new).toArray(Block[]::new);
        channelOfElement = new int[system.elements()];
        int[] owner = new int[system.elements() + blocks.length];
        int channels = 0;
        for (Block block : blocks) {
            boolean perCrystal = block.readout.channel() == Readout.Channel.CRYSTAL;
            for (int i = 0; i < block.placed.kind().elements(); i++) {
                if (perCrystal || i == 0) {
                    owner[channels++] = block.placed.index();
                }
                channelOfElement[block.placed.firstElement() + i] = channels - 1;
            }
        }
        blockOfChannel = Arrays.copyOf(owner, channels);
    }

    int channels() {
        return blockOfChannel.length;
    }

    int channelOf(int element) {
        return channelOfElement[element];
    }

    Block blockOfChannel(int channel) {
        return blocks[blockOfChannel[channel]];
    }

    Block blockOf(int element) {
        return blocks[system.blockIndexOf(element)];
    }

    /** Whether any block measures a point that is finer than its element. */
    boolean measuresPoints() {
        return Arrays.stream(blocks).anyMatch(block -> block.monolithic);
    }

    /** Whether any block measures depth. */
    boolean measuresDepth() {
        return Arrays.stream(blocks).anyMatch(block -> block.readout.depthFwhmMm() != null);
    }

    /** How far a single can stand from the order of its first share of energy (ps). */
    long disorderPs() {
        double most = 0;
        for (Block block : blocks) {
            most = Math.max(most, block.integrationPs + 2 * CUT * block.timeSdPs + 2 * block.readout.timeStepPs());
        }
        return (long) Math.ceil(most);
    }
}
