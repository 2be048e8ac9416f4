/**
 * Events as columns, and the ports through which lists come in and go out. {@link org.raysheaf.geometry.event.Attribute} declares what an
 * event can say; {@link org.raysheaf.geometry.event.EventBlock} holds a run of events; {@link org.raysheaf.geometry.event.EventSource} and
 * {@link org.raysheaf.geometry.event.EventSink} are implemented by the io room. Nothing here opens a file. Public.
 */
@NullMarked
package org.raysheaf.geometry.event;

import org.jspecify.annotations.NullMarked;
