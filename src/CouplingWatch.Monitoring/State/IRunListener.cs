using CouplingWatch.Records;

namespace CouplingWatch.Monitoring.State;

/// <summary>Keeps something for the whole run (a pyramid of steps, a log). Called after the checks, in the order of the records; must not allocate per iteration.</summary>
internal interface IRunListener
{
    /// <summary>Any record, before it is judged.</summary>
    void Record(RunState run, StreamRecord record)
    {
    }

    /// <summary>After an iteration was judged; its row is the last of <see cref="RunState.Trace"/>.</summary>
    void Iteration(RunState run)
    {
    }

    /// <summary>After a step or a rejected attempt was judged.</summary>
    void StepClosed(RunState run, in ClosedStep step)
    {
    }

    /// <summary>A revision is in force from this step on.</summary>
    void SettingsInForce(RunState run, int fromStep)
    {
    }
}
