//! Starts the page.

fn main() {
    tubewright_www::start();
}
