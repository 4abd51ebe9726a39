//! Sets, tables and geometry, and the readers of pasted text.
