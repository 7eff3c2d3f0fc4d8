"""gibbsmin: equilibrium and speciation by Gibbs energy minimization."""
