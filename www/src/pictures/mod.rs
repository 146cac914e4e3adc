//! Pictures: the sign to scale, and the loading bar. Where things lie is plain arithmetic, tested
//! natively; the components only draw it.

mod eye;
mod fingers;
mod hands;
mod loading;
mod paint;
mod scale;
mod scene;
mod sign;
mod tap;
mod window;

pub use loading::LoadingBar;
pub use sign::SignPicture;
pub use tap::part_marked;
