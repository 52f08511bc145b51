export { Solver, Outcome } from 'odex';
