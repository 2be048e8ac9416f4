package org.raysheaf.io.description;

import java.util.regex.Pattern;
import org.yaml.snakeyaml.DumperOptions.ScalarStyle;
import org.yaml.snakeyaml.nodes.MappingNode;
import org.yaml.snakeyaml.nodes.Node;
import org.yaml.snakeyaml.nodes.ScalarNode;
import org.yaml.snakeyaml.nodes.SequenceNode;
import org.yaml.snakeyaml.nodes.Tag;

/** Says in a few words what stands in a file, for the second half of a message. */
final class Found {
    private static final int LONGEST = 60;
    private static final Pattern NUMBER = Pattern.compile("[-+]?\\.?[0-9][-+.0-9eE]*");

    private Found() {}

    static boolean isNothing(Node node) {
        return node instanceof ScalarNode scalar
                && scalar.getScalarStyle() == ScalarStyle.PLAIN
                && scalar.getTag().equals(Tag.NULL);
    }

    static String describe(Node node) {
        if (isNothing(node)) {
            return "nothing";
        }
        if (node instanceof MappingNode) {
            return "a mapping";
        }
        if (node instanceof SequenceNode sequence) {
            return "a list of " + sequence.getValue().size();
        }
        ScalarNode scalar = (ScalarNode) node;
        String text = scalar.getValue();
        boolean number = scalar.getScalarStyle() == ScalarStyle.PLAIN
                && text.length() <= LONGEST
                && NUMBER.matcher(text).matches();
        return number ? text : "\"" + excerpt(text) + "\"";
    }

    /** A text short and plain enough for one line. */
    static String excerpt(String text) {
        String line = text.strip().replaceAll("\\s+", " ");
        return line.length() <= LONGEST ? line : line.substring(0, LONGEST - 1) + "…";
    }
}
