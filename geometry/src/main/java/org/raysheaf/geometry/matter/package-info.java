/** What detectors and sources are made of: materials and nuclides. Public. */
@NullMarked
package org.raysheaf.geometry.matter;

import org.jspecify.annotations.NullMarked;
