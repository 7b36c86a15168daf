namespace CouplingWatch.Monitoring.State;

/// <summary>The hold-off of rules that compare with history: they keep quiet in the first steps after something changed.</summary>
internal sealed class Learning
{
    /// <summary>Steps such a rule waits.</summary>
    public const int Steps = 4;

    private int done;

    /// <summary>Why it waits: start, restart, resize, applied, time-step.</summary>
    public string Since { get; private set; } = "start";

    public bool Holds => done < Steps;

    public int StepsDone => done;

    public void Restart(string since)
    {
        Since = since;
        done = 0;
    }

    /// <summary>The run starts with a basis it kept: nothing to wait for.</summary>
    public void Skip() => done = Steps;

    public void StepDone()
    {
        if (done < Steps) done++;
    }
}
