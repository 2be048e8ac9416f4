package org.raysheaf.io.description;

import java.util.ArrayList;
import java.util.IdentityHashMap;
import java.util.List;
import org.jspecify.annotations.Nullable;
import org.yaml.snakeyaml.nodes.MappingNode;
import org.yaml.snakeyaml.nodes.Node;
import org.yaml.snakeyaml.nodes.NodeTuple;
import org.yaml.snakeyaml.nodes.SequenceNode;

/**
 * Guards against documents that are small in the file and huge, or endless, once their aliases are followed. After it, whoever walks
 * the nodes may recurse without a guard.
 */
final class Unfolding {
    /** Deeper than any settings. */
    static final int DEEPEST = 50;

    /** More than any settings; aliases of aliases multiply. */
    static final long MOST_VALUES = 4_000_000;

    /** Stands for a node whose extent is being found; every other has at least one level. */
    private static final Extent IN_PROGRESS = new Extent(0, 0);

    private final String source;
    private final IdentityHashMap<Node, Extent> known = new IdentityHashMap<>();

    /** Number of values and of levels below and including a node, aliases followed. */
    private record Extent(long values, int levels) {}

    Unfolding(String source) {
        this.source = source;
    }

    void require(Node root) throws DescriptionException {
        extentOf(root);
    }

    private Extent extentOf(Node node) throws DescriptionException {
        @Nullable Extent seen = known.get(node);
        if (seen != null) {
            check(seen.levels() > 0, node, "expected a value that ends, found an alias for something that holds it");
            return seen;
        }
        known.put(node, IN_PROGRESS);
        long values = 1;
        int levels = 0;
        for (Node child : children(node)) {
            Extent below = extentOf(child);
            values += below.values();
            levels = Math.max(levels, below.levels());
        }
        check(
                values <= MOST_VALUES,
                node,
                "expected at most " + MOST_VALUES + " values, found more behind its aliases");
        check(levels < DEEPEST, node, "expected at most " + DEEPEST + " levels, found more behind its aliases");
        Extent extent = new Extent(values, levels + 1);
        known.put(node, extent);
        return extent;
    }

    private void check(boolean holds, Node node, String message) throws DescriptionException {
        if (!holds) {
            throw new DescriptionException(source, Place.lineOf(node), 0, message);
        }
    }

    private static List<Node> children(Node node) {
        List<Node> children = new ArrayList<>();
        if (node instanceof SequenceNode sequence) {
            children.addAll(sequence.getValue());
        } else if (node instanceof MappingNode mapping) {
            for (NodeTuple entry : mapping.getValue()) {
                children.add(entry.getKeyNode());
                children.add(entry.getValueNode());
            }
        }
        return children;
    }
}
