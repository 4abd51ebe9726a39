//! Journal notation: text to checked formulation to model.
