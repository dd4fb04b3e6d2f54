package words

// Set-up: accounts, programmes, calibres, depositors, the journal.
var _ = []struct{}{
	fault("programme_version_taken", "This version of the programme is there already with another content. A version that exists is never changed: give the new one another version.", "Cette version du programme existe déjà avec un autre contenu. Une version existante n’est jamais modifiée : donnez une autre version à la nouvelle.", "Diese Version des Programms gibt es schon mit anderem Inhalt. Eine Version, die es gibt, wird nie geändert: geben Sie der neuen eine andere Version."),
	fault("programme_known", "This programme is there already, exactly like this.", "Ce programme existe déjà, exactement ainsi.", "Dieses Programm gibt es schon, genau so."),
	fault("programme_faulty", "The programme cannot be used: {fault}.", "Le programme ne peut pas être utilisé : {fault}.", "Das Programm lässt sich nicht verwenden: {fault}."),
	fault("guarded_not_built", "The guarded decision rule is not built yet; a batch on this programme would be judged without its guard band.", "La règle de décision avec marge de sécurité n’est pas encore réalisée ; un lot de ce programme serait jugé sans sa marge.", "Die Entscheidungsregel mit Schutzabstand ist noch nicht gebaut; ein Los dieses Programms würde ohne ihn beurteilt."),
}
