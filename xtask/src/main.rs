//! t
fn main(){}
