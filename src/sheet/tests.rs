//! What holds for furniture as a whole.
