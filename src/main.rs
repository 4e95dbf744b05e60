//! Command line of seaplumb.
fn main() {}
