@NullMarked
package org.raysheaf.engine.blur;

import org.jspecify.annotations.NullMarked;
