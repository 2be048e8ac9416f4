package org.raysheaf.app;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.AccessDeniedException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.NoSuchFileException;
import picocli.CommandLine;

/** Turns what went wrong into one message and an exit code: 1 for a problem in data or files, 2 for usage. */
final class Failures implements CommandLine.IExecutionExceptionHandler, CommandLine.IParameterExceptionHandler {
    Failures() {}

    @Override
    public int handleExecutionException(Exception failure, CommandLine line, CommandLine.ParseResult parsed)
            throws Exception {
        if (failure instanceof CommandLine.ParameterException usage) {
            return handleParseException(usage, new String[0]);
        }
        boolean verbose =
                line.getCommand() instanceof Verb verb && verb.common().verbose();
        line.getErr().println("raysheaf " + line.getCommandName() + ": " + words(failure));
        if (verbose) {
            failure.printStackTrace(line.getErr());
        }
        line.getErr().flush();
        return 1;
    }

    private static String words(Exception failure) {
        if (failure instanceof NoSuchFileException missing) {
            return missing.getFile() + ": there is no such file";
        }
        if (failure instanceof FileAlreadyExistsException existing) {
            return existing.getFile() + " is already there; choose another name or add --replace";
        }
        if (failure instanceof AccessDeniedException denied) {
            return denied.getFile() + ": permission denied";
        }
        boolean expected = failure instanceof IOException
                || failure instanceof UncheckedIOException
                || failure instanceof IllegalArgumentException;
        if (expected && failure.getMessage() != null) {
            return failure.getMessage();
        }
        return "this should not happen and is our mistake: " + failure
                + "; run it again with --verbose and report what it prints";
    }

    @Override
    public int handleParseException(CommandLine.ParameterException usage, String[] arguments) {
        CommandLine line = usage.getCommandLine();
        line.getErr().println("raysheaf: " + usage.getMessage());
        CommandLine.UnmatchedArgumentException.printSuggestions(usage, line.getErr());
        line.getErr().println("see: raysheaf " + verb(line) + "--help");
        line.getErr().flush();
        return 2;
    }

    private static String verb(CommandLine line) {
        return line.getParent() == null ? "" : line.getCommandName() + " ";
    }
}
