package org.raysheaf.io.description;

import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.jspecify.annotations.Nullable;
import org.yaml.snakeyaml.nodes.MappingNode;
import org.yaml.snakeyaml.nodes.Node;
import org.yaml.snakeyaml.nodes.NodeTuple;
import org.yaml.snakeyaml.nodes.ScalarNode;
import org.yaml.snakeyaml.nodes.SequenceNode;

/**
 * Finds the line for a field that a record complains about. The record may point below itself, as in {@code blocks[2].pitch_mm}; the
 * search goes as far down as the file does.
 */
final class FieldPath {
    private static final Pattern STEP = Pattern.compile("\\[([0-9]{1,9})]|([^.\\[\\]]+)");

    private FieldPath() {}

    static Place place(Entries entries, String field) {
        Matcher step = STEP.matcher(field);
        if (!step.find() || step.group(2) == null) {
            return entries.place().key(field, entries.place().line());
        }
        int line = entries.placeOf(step.group(2)).line();
        @Nullable Node node = entries.value(step.group(2));
        while (node != null && step.find()) {
            if (step.group(1) != null) {
                node = item(node, Integer.parseInt(step.group(1)));
                line = node == null ? line : Place.lineOf(node);
            } else {
                @Nullable NodeTuple entry = entry(node, step.group(2));
                node = entry == null ? null : entry.getValueNode();
                line = entry == null ? line : Place.lineOf(entry.getKeyNode());
            }
        }
        return entries.place().key(field, line);
    }

    private static @Nullable Node item(Node node, int index) {
        List<Node> items = node instanceof SequenceNode sequence ? sequence.getValue() : List.of();
        return index < items.size() ? items.get(index) : null;
    }

    private static @Nullable NodeTuple entry(Node node, String key) {
        List<NodeTuple> entries = node instanceof MappingNode mapping ? mapping.getValue() : List.of();
        for (NodeTuple entry : entries) {
            if (entry.getKeyNode() instanceof ScalarNode scalar
                    && scalar.getValue().equals(key)) {
                return entry;
            }
        }
        return null;
    }
}
