//! Pictures: the sign to scale, the loading bar, the plot of a circuit along its string, and bench readings. Where
//! things lie is plain arithmetic, tested natively; the components only draw it.

mod eye;
mod fingers;
mod hands;
mod joint;
mod loading;
mod paint;
mod plot;
mod profile;
mod readings;
mod scale;
mod scene;
mod sign;
mod tap;
mod window;

pub use loading::LoadingBar;
pub use plot::beside;
pub use profile::ProfilePlot;
pub use readings::ReadingsPicture;
pub use sign::SignPicture;
pub use tap::part_marked;
