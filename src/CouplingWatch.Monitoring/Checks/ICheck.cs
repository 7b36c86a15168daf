using CouplingWatch.Monitoring.Advising;
using CouplingWatch.Monitoring.State;
using CouplingWatch.Wire;

namespace CouplingWatch.Monitoring.Checks;

/// <summary>One check. It reads the state of the run and reports a finding at each record at which its condition holds.</summary>
internal interface ICheck
{
    /// <summary>One of <see cref="CheckIds"/>.</summary>
    string Id { get; }

    /// <summary>After the state took in an iteration.</summary>
    void Iteration(RunState run, List<Finding> findings)
    {
    }

    /// <summary>After a step, or an attempt at one, was closed; not for rejected attempts.</summary>
    void StepClosed(RunState run, in ClosedStep step, List<Finding> findings)
    {
    }

    /// <summary>Something changed that earlier steps do not compare with.</summary>
    void Restart(RunState run, RestartCause cause)
    {
    }

    /// <summary>What would answer an open alert of this check, best first.</summary>
    void Advise(RunState run, Alert alert, List<Move> moves)
    {
    }

    /// <summary>What keeps this check from judging the run as it is sent; null when nothing does.</summary>
    NotJudged? Lacks(RunState run) => null;
}

internal enum RestartCause { Settings, Resize, TimeStep }
