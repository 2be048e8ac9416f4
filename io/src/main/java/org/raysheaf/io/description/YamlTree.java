package org.raysheaf.io.description;

import java.io.StringReader;
import java.util.Iterator;
import org.jspecify.annotations.Nullable;
import org.yaml.snakeyaml.LoaderOptions;
import org.yaml.snakeyaml.Yaml;
import org.yaml.snakeyaml.error.Mark;
import org.yaml.snakeyaml.error.MarkedYAMLException;
import org.yaml.snakeyaml.error.YAMLException;
import org.yaml.snakeyaml.nodes.MappingNode;
import org.yaml.snakeyaml.nodes.Node;

/** From text to YAML nodes, each of which knows its line. What comes out is one document, finite, and of bearable size and depth. */
final class YamlTree {
    private final String source;

    private YamlTree(String source) {
        this.source = source;
    }

    static MappingNode root(DescriptionText text) throws DescriptionException {
        YamlTree tree = new YamlTree(text.source());
        Node root = tree.parse(text.text());
        new Unfolding(text.source()).require(root);
        if (!(root instanceof MappingNode mapping)) {
            throw new DescriptionException(
                    text.source(), Place.lineOf(root), 0, "expected a mapping, found " + Found.describe(root));
        }
        return mapping;
    }

    /** A single value, such as a default. */
    static Node value(String text, String source) throws DescriptionException {
        return new YamlTree(source).parse(text);
    }

    private Node parse(String text) throws DescriptionException {
        LoaderOptions options = new LoaderOptions();
        options.setCodePointLimit(DescriptionText.LARGEST);
        options.setNestingDepthLimit(Unfolding.DEEPEST);
        options.setMaxAliasesForCollections(DescriptionText.LARGEST); // Unfolding is the finer guard
        try {
            Iterator<Node> documents =
                    new Yaml(options).composeAll(new StringReader(text)).iterator();
            if (!documents.hasNext()) {
                throw new DescriptionException(source, "expected a value, found nothing");
            }
            Node first = documents.next();
            if (documents.hasNext()) {
                throw new DescriptionException(
                        source,
                        Place.lineOf(documents.next()),
                        0,
                        "expected one document, found a second one; put it into a file of its own");
            }
            return first;
        } catch (MarkedYAMLException e) {
            throw syntax(e);
        } catch (YAMLException e) {
            throw new DescriptionException(source, "expected readable YAML, found: " + firstLine(e.getMessage()));
        }
    }

    private DescriptionException syntax(MarkedYAMLException e) {
        Mark mark = e.getProblemMark() != null ? e.getProblemMark() : e.getContextMark();
        int line = mark == null ? 0 : mark.getLine() + 1;
        int column = mark == null ? 0 : mark.getColumn() + 1;
        String problem = firstLine(e.getProblem() != null ? e.getProblem() : e.getMessage());
        if (problem.contains("'\\t(TAB)'")) {
            return new DescriptionException(
                    source, line, column, "expected spaces, found a tab; YAML is indented with spaces only");
        }
        String context = e.getContext() == null ? "" : " " + firstLine(e.getContext());
        return new DescriptionException(source, line, column, "expected readable YAML, but" + context + ": " + problem);
    }

    private static String firstLine(@Nullable String message) {
        return message == null
                ? "no reason given"
                : message.lines().findFirst().orElse("").strip();
    }
}
