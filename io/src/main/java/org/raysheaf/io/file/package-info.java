/** How whole files come into being: completely or not at all. Read {@link org.raysheaf.io.file.AtomicFile}. For the io room. */
@NullMarked
package org.raysheaf.io.file;

import org.jspecify.annotations.NullMarked;
