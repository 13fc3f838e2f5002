// Lets a worker thread load .ts when the product runs from source: a thread does not inherit tsx.
import { register } from 'tsx/esm/api';

register();
