//! Keeping records on the device: the only code that touches `IndexedDB`.
//!
//! Each batch of writes is one transaction, so a record and the state that points at it are stored
//! together or not at all.

mod others;

use std::cell::RefCell;
use std::collections::VecDeque;
use std::rc::Rc;

use rexie::{ObjectStore, Rexie, TransactionMode};
use wasm_bindgen::{JsCast, JsValue};

use crate::document::{Kept, Write};

pub use others::watch_for_others;

const DATABASE: &str = "tubewright";
const RECORDS: &str = "records";
/// Version of the store's shape (not of the documents in it).
const VERSION: u32 = 1;

/// How keeping stands, for the header.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub enum Standing {
    /// Nothing has been asked of it yet.
    #[default]
    Starting,
    /// Everything so far is on the device.
    Kept,
    /// Writes are under way.
    Keeping,
    /// It did not work; why.
    NotKept(String),
}

/// The open store.
#[derive(Clone)]
pub struct Keeper {
    database: Rc<Rexie>,
    waiting: Rc<RefCell<VecDeque<Vec<Write>>>>,
    busy: Rc<RefCell<bool>>,
}

impl core::fmt::Debug for Keeper {
    fn fmt(&self, f: &mut core::fmt::Formatter<'_>) -> core::fmt::Result {
        f.debug_struct("Keeper")
            .field("waiting", &self.waiting.borrow().len())
            .finish_non_exhaustive()
    }
}

impl Keeper {
    /// Opens the store and reads every record.
    ///
    /// # Errors
    /// A sentence when the browser has no such store or refuses it.
    pub async fn open() -> Result<(Self, Kept), String> {
        let database = Rexie::builder(DATABASE)
            .version(VERSION)
            .add_object_store(ObjectStore::new(RECORDS))
            .build()
            .await
            .map_err(|error| refused(&error))?;
        let kept = read_all(&database).await.map_err(|error| refused(&error))?;
        let keeper = Self {
            database: Rc::new(database),
            waiting: Rc::default(),
            busy: Rc::default(),
        };
        Ok((keeper, kept))
    }

    /// Stores writes after all earlier ones; `tell` hears how it stands.
    pub fn store(&self, writes: Vec<Write>, tell: impl Fn(Standing) + 'static) {
        self.waiting.borrow_mut().push_back(writes);
        if self.busy.replace(true) {
            return;
        }
        tell(Standing::Keeping);
        let keeper = self.clone();
        wasm_bindgen_futures::spawn_local(async move {
            loop {
                // What has come in meanwhile goes out together, oldest first.
                let batch: Vec<Write> = keeper.waiting.borrow_mut().drain(..).flatten().collect();
                if batch.is_empty() {
                    break;
                }
                if let Err(error) = write_all(&keeper.database, &batch).await {
                    keeper.waiting.borrow_mut().push_front(batch);
                    keeper.busy.replace(false);
                    tell(Standing::NotKept(refused(&error)));
                    return;
                }
            }
            keeper.busy.replace(false);
            tell(Standing::Kept);
        });
    }
}

/// Asks the browser not to clear the store when space runs low. The answer changes nothing here.
pub fn ask_to_stay() {
    if let Some(window) = web_sys::window()
        && let Ok(storage) = js_sys::Reflect::get(&window.navigator(), &"storage".into())
        && let Ok(storage) = storage.dyn_into::<web_sys::StorageManager>()
        && let Ok(answer) = storage.persist()
    {
        wasm_bindgen_futures::spawn_local(async move {
            let _ = wasm_bindgen_futures::JsFuture::from(answer).await;
        });
    }
}

fn refused(error: &rexie::Error) -> String {
    format!("this browser refuses to keep it ({error})")
}

async fn read_all(database: &Rexie) -> Result<Kept, rexie::Error> {
    let transaction = database.transaction(&[RECORDS], TransactionMode::ReadOnly)?;
    let store = transaction.store(RECORDS)?;
    let all = store.scan(None, None, None, None).await?;
    transaction.done().await?;
    let text = |value: &JsValue| value.as_string();
    Ok(all
        .iter()
        .filter_map(|(name, value)| Some((text(name)?, text(value)?)))
        .collect())
}

async fn write_all(database: &Rexie, writes: &[Write]) -> Result<(), rexie::Error> {
    let transaction = database.transaction(&[RECORDS], TransactionMode::ReadWrite)?;
    let store = transaction.store(RECORDS)?;
    for write in writes {
        let name = JsValue::from_str(&write.name);
        match &write.value {
            Some(value) => {
                store.put(&JsValue::from_str(value), Some(&name)).await?;
            }
            None => store.delete(name).await?,
        }
    }
    transaction.done().await?;
    Ok(())
}
