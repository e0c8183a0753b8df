(** * The pieces that are left when a set is removed

    Each vertex outside the set is labelled with the first vertex of its piece, by a flood.
    Nothing is proved of the flood: a checker looks whether labels are constant along edges
    outside the set, and counts the vertices that are their own label. If these are right,
    different labels are different pieces, whoever wrote them. *)

From Coq Require Import Bool List PArith ZArith FMapPositive Lia.
From Certify Require Import Question Facts Totals Sets.
Import ListNotations.

Implicit Types (r u v w x : vertex).

(** Gives the label [name] to what can be reached from [stack]. [fuel] bounds the vertices
    taken from the stack; each is put there once for each of its edges, and once to start. *)
Fixpoint flood (near : PositiveMap.t (list vertex)) (set : PositiveMap.t unit) (name : vertex)
    (fuel : nat) (stack : list vertex) (label : PositiveMap.t vertex) : PositiveMap.t vertex :=
  match fuel, stack with
  | S fuel, v :: stack =>
      if PositiveMap.mem v set || PositiveMap.mem v label
      then flood near set name fuel stack label
      else flood near set name fuel (rev_append (neighbours near v) stack)
             (PositiveMap.add v name label)
  | _, _ => label
  end.

Definition labels (Q : question) (set : PositiveMap.t unit) : PositiveMap.t vertex :=
  let near := adjacency Q in
  let fuel := S (length (edges Q) + length (edges Q)) in
  fold_left (fun label v => flood near set v fuel [v] label)
    (count_up (order Q) 1%positive) (PositiveMap.empty _).

Definition labelled (label : PositiveMap.t vertex) (v name : vertex) : bool :=
  match PositiveMap.find v label with
  | Some found => (found =? name)%positive
  | None => false
  end.

(** Is [v], outside the set, its own label? *)
Definition names_piece (set : PositiveMap.t unit) (label : PositiveMap.t vertex) (v : vertex) :=
  negb (PositiveMap.mem v set) && labelled label v v.

(** The vertices outside the set with a label. *)
Definition piece (set : PositiveMap.t unit) (label : PositiveMap.t vertex) (name v : vertex) :=
  negb (PositiveMap.mem v set) && labelled label v name.

(** Has the edge an end in the set, or the same label at both ends? *)
Definition keeps_label (set : PositiveMap.t unit) (label : PositiveMap.t vertex)
    (e : vertex * vertex) : bool :=
  PositiveMap.mem (fst e) set || PositiveMap.mem (snd e) set
  || match PositiveMap.find (fst e) label, PositiveMap.find (snd e) label with
     | Some a, Some b => (a =? b)%positive
     | _, _ => false
     end.

(** A vertex has one label. *)
Lemma other_piece : forall set label r v,
  piece set label v v = true -> r <> v -> piece set label r v = false.
Proof.
  intros set label r v own differ. unfold piece, labelled in *.
  destruct (PositiveMap.find v label) as [found |]; [| now rewrite andb_false_r in own].
  apply andb_true_iff in own as [-> own]. apply Pos.eqb_eq in own as ->.
  apply Pos.eqb_neq. congruence.
Qed.

Lemma one_label : forall set label roots v, NoDup roots ->
  (sum (fun r => Z.b2z (piece set label r v)) roots <= 1)%Z.
Proof.
  intros set label roots v distinct. unfold piece, labelled.
  destruct (PositiveMap.mem v set); cbn [negb andb Z.b2z]; [rewrite sum_constant; lia |].
  destruct (PositiveMap.find v label) as [found |]; cbn [Z.b2z]; [| rewrite sum_constant; lia].
  induction distinct as [| r roots fresh distinct IH]; cbn [sum]; [lia |].
  destruct (Pos.eqb_spec found r) as [<- | _]; cbn [Z.b2z]; [| lia].
  assert (sum (fun r => Z.b2z (found =? r)%positive) roots = 0%Z) as ->; [| lia].
  transitivity (sum (fun _ => 0%Z) roots); [| rewrite sum_constant; lia].
  apply sum_ext. intros r listed. destruct (Pos.eqb_spec found r) as [-> | _]; easy.
Qed.

(** The pieces that an edge leaves and, doubly, an edge inside the set are paid for by its
    ends in the set. *)
Lemma pieces_left : forall set label roots u v extra,
  NoDup roots -> keeps_label set label (u, v) = true ->
  (sum (fun r => Z.b2z (leaves (piece set label r) (u, v))) roots
   + 2 * Z.b2z (PositiveMap.mem u set && PositiveMap.mem v set && extra)
   <= Z.b2z (PositiveMap.mem u set) + Z.b2z (PositiveMap.mem v set))%Z.
Proof.
  intros set label roots u v extra distinct keeps.
  unfold keeps_label in keeps. cbn [fst snd] in keeps.
  assert (same : forall w x, PositiveMap.mem w set = true -> PositiveMap.mem x set = true ->
            sum (fun r => Z.b2z (xorb (piece set label r w) (piece set label r x))) roots = 0%Z).
  { intros w x w_in x_in. transitivity (sum (fun _ => 0%Z) roots); [| rewrite sum_constant; lia].
    apply sum_ext. intros r _. unfold piece. now rewrite w_in, x_in. }
  pose proof (one_label set label roots u distinct) as u_once.
  pose proof (one_label set label roots v distinct) as v_once.
  unfold leaves. cbn [fst snd].
  destruct (PositiveMap.mem u set) eqn:u_in, (PositiveMap.mem v set) eqn:v_in;
    cbn [orb andb Z.b2z] in *.
  - rewrite same by assumption. destruct extra; cbn [Z.b2z]; lia.
  - rewrite (sum_ext _ _ (fun r => Z.b2z (piece set label r v))); [lia |].
    intros r _. unfold piece at 1. rewrite u_in. apply (f_equal Z.b2z), xorb_false_l.
  - rewrite (sum_ext _ _ (fun r => Z.b2z (piece set label r u))); [lia |].
    intros r _. unfold piece at 2. rewrite v_in. apply (f_equal Z.b2z), xorb_false_r.
  - rewrite (sum_ext _ _ (fun _ => 0%Z)); [rewrite sum_constant; lia |].
    intros r _. unfold piece, labelled. rewrite u_in, v_in.
    destruct (PositiveMap.find u label) as [a |], (PositiveMap.find v label) as [b |];
      try discriminate keeps.
    apply Pos.eqb_eq in keeps as ->. now rewrite xorb_nilpotent.
Qed.
