//! Pictures: the sign to scale, and the loading bar. Where things lie is plain arithmetic, tested
//! natively; the components only draw it.

mod loading;
mod scale;
mod scene;
mod sign;

pub use loading::LoadingBar;
pub use sign::SignPicture;
